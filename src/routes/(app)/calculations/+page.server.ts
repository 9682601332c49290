import { readListQuery } from '$lib/lists/query';
import { calculationList } from '$lib/lists/shapes';
import { listCalculations } from '$lib/server/calculations/list';
import { orHttpError } from '$lib/server/http/errors';
import { answerInBrief, methodTitle } from '$lib/wording/answer-in-brief';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const query = readListQuery(url.searchParams, calculationList);
	const listed = await orHttpError(listCalculations(locals.membership, query));
	return {
		query,
		listed: {
			...listed,
			rows: listed.rows.map(({ outcome, method, ...row }) => ({
				...row,
				method: method === null ? null : methodTitle(method),
				answer: outcome && answerInBrief(outcome)
			}))
		}
	};
};
