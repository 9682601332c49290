import { readListQuery } from '$lib/lists/query';
import { reportList } from '$lib/lists/shapes';
import { orHttpError } from '$lib/server/http/errors';
import { listReports } from '$lib/server/reports/list';
import { answerInBrief } from '$lib/wording/answer-in-brief';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const query = readListQuery(url.searchParams, reportList);
	const listed = await orHttpError(listReports(locals.membership, query));
	return {
		query,
		listed: {
			...listed,
			rows: listed.rows.map(({ outcome, ...row }) => ({ ...row, answer: outcome && answerInBrief(outcome) }))
		}
	};
};
