import { and, eq } from 'drizzle-orm';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import type { Transaction } from '../db';
import { dossiers, organisations, reports } from '../db/schema';
import { getReport, type ReportView } from '../reports/load';

/**
 * Holds a report, and what it prints of its organisation and dossier, still until the transaction ends. Locks are
 * taken in this order everywhere: organisation, dossier, report. A change of the dossier that is under way is waited
 * for; one that comes later waits, and then finds the approval that it makes void.
 * @returns the report as it stands now
 */
export async function holdReport(
	tx: Transaction,
	membership: Membership,
	seen: Pick<ReportView, 'id' | 'dossier'>
): Promise<ReportView> {
	await tx
		.select({ id: organisations.id })
		.from(organisations)
		.where(eq(organisations.id, membership.organisationId))
		.for('share');
	await tx
		.select({ id: dossiers.id })
		.from(dossiers)
		.where(and(eq(dossiers.id, seen.dossier.id), inReach(membership, dossiers.id)))
		.for('no key update');
	await tx.select({ id: reports.id }).from(reports).where(eq(reports.id, seen.id)).for('update');
	return getReport(membership, seen.id, tx);
}
