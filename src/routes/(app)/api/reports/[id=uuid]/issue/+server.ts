import { error, json } from '@sveltejs/kit';
import { orHttpError } from '$lib/server/http/errors';
import { issueOf } from '$lib/server/reports/issue';
import { getReport } from '$lib/server/reports/load';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) => {
	const report = await orHttpError(getReport(locals.membership, params.id));
	const issue = await orHttpError(issueOf(locals.membership, report));
	if (issue === null) error(404, 'This report has not been issued.');
	return json({ state: issue.state });
};
