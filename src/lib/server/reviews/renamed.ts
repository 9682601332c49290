import { and, eq, inArray, or } from 'drizzle-orm';
import type { Transaction } from '../db';
import { reports, reviewerFigures } from '../db/schema';
import { voidStaleApprovals } from './approval';

/**
 * Voids approvals of reports that print a name which was just changed, in whichever organisation they are. Call it in
 * the transaction of the change, after it.
 */
export async function voidApprovalsNaming(tx: Transaction, userId: string): Promise<void> {
	const entered = tx
		.select({ id: reviewerFigures.reportId })
		.from(reviewerFigures)
		.where(eq(reviewerFigures.enteredBy, userId));
	const concerned = await tx
		.selectDistinct({ organisationId: reports.organisationId })
		.from(reports)
		.where(
			and(eq(reports.state, 'approved'), or(eq(reports.createdBy, userId), inArray(reports.id, entered)))
		)
		.orderBy(reports.organisationId);
	for (const { organisationId } of concerned) {
		// The house acts here, not the person: who was named may have left the organisation long ago.
		const house = {
			organisationId,
			organisationName: '',
			userId,
			roles: ['reader'],
			onlyDossiers: null
		} as const;
		await voidStaleApprovals(
			tx,
			house,
			{ personId: userId },
			'Somebody whom the report names changed their name'
		);
	}
}
