import { and, eq, inArray } from 'drizzle-orm';
import type { Queryable } from '../db';
import { dossierGuests, memberships, reports, runs, calculationVersions, users } from '../db/schema';
import type { ReportView } from '../reports/load';
import type { ReviewPerson } from './types';

export type People = (id: string | null) => ReviewPerson;

/** Names of people, and whether each is a guest of the dossier. */
export async function namesOf(
	organisationId: string,
	dossierId: string,
	ids: readonly (string | null)[],
	db: Queryable
): Promise<People> {
	const wanted = [...new Set(ids.filter((id) => id !== null))];
	const rows =
		wanted.length === 0
			? []
			: await db
					.select({
						id: users.id,
						name: users.name,
						member: memberships.userId,
						guest: dossierGuests.userId
					})
					.from(users)
					.leftJoin(
						memberships,
						and(eq(memberships.userId, users.id), eq(memberships.organisationId, organisationId))
					)
					.leftJoin(
						dossierGuests,
						and(eq(dossierGuests.userId, users.id), eq(dossierGuests.dossierId, dossierId))
					)
					.where(inArray(users.id, wanted));
	const known = new Map(
		rows.map(({ id, name, member, guest }) => [
			id,
			{ id, name: name ?? 'somebody', guest: member === null && guest !== null }
		])
	);
	return (id) => known.get(id ?? '') ?? { id: null, name: 'somebody whose account is gone', guest: false };
}

/**
 * Everybody who had a hand in a report: who made or saved it, and who typed or computed what its results rest on.
 * None of them is its independent reviewer.
 */
export async function handsIn(
	report: Pick<ReportView, 'id' | 'createdBy' | 'runIds'>,
	db: Queryable
): Promise<Set<string>> {
	const [row] = await db.select({ writers: reports.writers }).from(reports).where(eq(reports.id, report.id));
	const hands = new Set(row?.writers ?? []);
	if (report.createdBy !== null) hands.add(report.createdBy);
	if (report.runIds.length > 0) {
		const computed = await db
			.selectDistinct({ by: runs.createdBy, calculationId: runs.calculationId })
			.from(runs)
			.where(inArray(runs.id, report.runIds));
		const saved = await db
			.selectDistinct({ by: calculationVersions.savedBy })
			.from(calculationVersions)
			.where(
				inArray(
					calculationVersions.calculationId,
					computed.map(({ calculationId }) => calculationId)
				)
			);
		for (const { by } of [...computed, ...saved]) if (by !== null) hands.add(by);
	}
	return hands;
}
