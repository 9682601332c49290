import { and, eq, type Column } from 'drizzle-orm';
import { database, type Queryable } from '../db';
import { calculations, dossiers, reports } from '../db/schema';
import { can, type Action } from './can';
import type { Membership } from './membership';
import { inReach } from './reach';

interface Kept {
	table: typeof dossiers | typeof calculations | typeof reports;
	dossierId: Column;
	reading: Action;
}

const kept = {
	dossiers: { table: dossiers, dossierId: dossiers.id, reading: 'dossier.read' },
	calculations: { table: calculations, dossierId: calculations.dossierId, reading: 'calculation.read' },
	reports: { table: reports, dossierId: reports.dossierId, reading: 'report.read' }
} as const satisfies Record<string, Kept>;

export type KindInSight = keyof typeof kept;

export function isKindInSight(name: string): name is KindInSight {
	return Object.hasOwn(kept, name);
}

/**
 * Whether somebody may know that a thing is there: it is their organisation's and within their reach. One that was put
 * away counts, since it can be brought back.
 */
export async function isInSight(
	membership: Membership,
	kind: KindInSight,
	id: string,
	db: Queryable = database()
): Promise<boolean> {
	const { table, dossierId, reading }: Kept = kept[kind];
	if (!can(membership, reading)) return false;
	const [row] = await db
		.select({ id: table.id })
		.from(table)
		.where(
			and(
				eq(table.id, id),
				eq(table.organisationId, membership.organisationId),
				inReach(membership, dossierId)
			)
		);
	return row !== undefined;
}
