import type { ReportState } from '../reports/load';

/** States as a sentence says them: "is in review". */
export const stateWords: Readonly<Record<ReportState, string>> = {
	draft: 'a draft',
	'in-review': 'in review',
	returned: 'returned',
	approved: 'approved',
	issued: 'issued',
	superseded: 'superseded',
	withdrawn: 'withdrawn'
};
