import { orHttpError } from '$lib/server/http/errors';
import { getReport } from '$lib/server/reports/load';
import { getPreview } from '$lib/server/reports/preview';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const { id, number, title } = await orHttpError(getReport(locals.membership, params.id));
	return {
		report: { id, number, title },
		preview: await orHttpError(getPreview(locals.membership, params.preview))
	};
};
