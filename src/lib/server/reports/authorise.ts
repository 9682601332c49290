import type { ReviewSource } from '$lib/report';
import { ConflictError, ForbiddenError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Transaction } from '../db';
import { approvalOf, coveredBy, printedApproval, staleness, voidApproval } from '../reviews/approval';
import { selfApprovalAllowed } from '../reviews/policy';
import { stateWords } from '../reviews/words';
import type { ReportView } from './load';
import { unissued } from './model';

/** What the report will say of its review; or that its approval had to be voided, and why. */
export type Authorisation = { review: ReviewSource } | { voided: string };

/**
 * Whether a report may leave the house: with an approval that still covers what it prints, or, where the
 * organisation's rules allow that, on its author's word alone, which the report then says. Under the report's lock.
 * An approval that does not hold any more is voided; the caller commits that and refuses the issue.
 * @throws ConflictError in any other state, ForbiddenError where a second reader is wanted
 */
export async function authorisationOf(
	membership: Membership,
	report: ReportView,
	tx: Transaction
): Promise<Authorisation> {
	const { number, state } = report;
	if (state === 'in-review') {
		throw new ConflictError(`Report ${number} is in review: wait for the decision, or take it back first.`);
	}
	if (state === 'returned') {
		throw new ConflictError(
			`Report ${number} was returned by its reviewer: send it again once it is mended.`
		);
	}
	if (state !== 'draft' && state !== 'approved') {
		throw new ConflictError(`Report ${number} is ${stateWords[state]} and cannot be issued again.`);
	}
	const selfApproval = await selfApprovalAllowed(membership.organisationId, tx);
	const round = state === 'approved' ? await approvalOf(report, tx) : undefined;
	if (round === undefined) {
		if (selfApproval) return { review: unissued.review };
		throw new ForbiddenError(
			'Your organisation requires a second reader’s approval before a report is issued: send it for review.'
		);
	}
	const stale = staleness(await coveredBy(membership, report, tx), round);
	if (stale !== null) {
		const reason = `It was changed after the approval: ${stale}.`;
		await voidApproval(tx, membership, report, round, { reason });
		return { voided: reason };
	}
	if (!round.independent && !selfApproval) {
		throw new ForbiddenError(
			'This report was approved by one who wrote it, and your organisation now wants a second reader: open it again and send it for review.'
		);
	}
	return { review: await printedApproval(report, round, tx) };
}
