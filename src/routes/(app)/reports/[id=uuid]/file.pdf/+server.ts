import { orHttpError } from '$lib/server/http/errors';
import { pdfResponse } from '$lib/server/http/pdf-response';
import { issuedFile } from '$lib/server/reports/issue';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) => {
	const { name, pdf } = await orHttpError(issuedFile(locals.membership, params.id));
	return pdfResponse(pdf, name, 'attachment');
};
