import { readListQuery } from '$lib/lists/query';
import { reportList } from '$lib/lists/shapes';
import { orHttpError } from '$lib/server/http/errors';
import { listReports } from '$lib/server/reports/list';
import { readersOf, waitingForMe } from '$lib/server/reviews/waiting';
import { answerInBrief } from '$lib/wording/answer-in-brief';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const query = readListQuery(url.searchParams, reportList);
	const [listed, waiting] = await orHttpError(
		Promise.all([listReports(locals.membership, query), waitingForMe(locals.membership)])
	);
	const readers = await orHttpError(
		readersOf(
			locals.membership,
			listed.rows.map(({ id }) => id)
		)
	);
	return {
		query,
		waiting,
		listed: {
			...listed,
			rows: listed.rows.map(({ outcome, ...row }) => ({
				...row,
				answer: outcome && answerInBrief(outcome),
				readers: readers.get(row.id) ?? null
			}))
		}
	};
};
