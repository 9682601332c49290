import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { inArray, type Column } from 'drizzle-orm';
import type { PgTable } from 'drizzle-orm/pg-core';
import type { Database } from '$lib/server/db';
import {
	calculations,
	calculationVersions,
	dossierGuests,
	dossiers,
	evidence,
	invitations,
	issues,
	previews,
	reports,
	reviewComments,
	reviewerFigures,
	reviews,
	runs,
	shareLinks
} from '$lib/server/db/schema';

/*
 * A dossier with all that hangs on it, once more under new ids: what one request changes is nobody else's. Copied row
 * by row, since computing, signing and reviewing afresh for each request would take minutes.
 */

type Row = Record<string, unknown>;

/** Tables below a dossier, parents first, each with the column that names its parent. */
const below: readonly [PgTable, Column][] = [
	[dossierGuests, dossierGuests.dossierId],
	[invitations, invitations.dossierId],
	[calculations, calculations.dossierId],
	[calculationVersions, calculationVersions.calculationId],
	[runs, runs.calculationId],
	[evidence, evidence.dossierId],
	[reports, reports.dossierId],
	[issues, issues.reportId],
	[previews, previews.reportId],
	[reviews, reviews.reportId],
	[reviewComments, reviewComments.reportId],
	[reviewerFigures, reviewerFigures.reportId],
	[shareLinks, shareLinks.reportId]
];

/** Columns that no two rows may have alike. */
const fresh: Readonly<Record<string, (row: Row) => unknown>> = {
	number: () => `QX-${parseInt(randomBytes(3).toString('hex'), 16)}`,
	code: () => newCode(),
	tokenHash: () => createHash('sha256').update(randomBytes(32)).digest('hex'),
	email: () => `${randomUUID()}@people.example`
};

function newCode(): string {
	const letters = '23456789ABCDEFGHJKMNPQRSTVWXYZ';
	const text = [...randomBytes(8)].map((byte) => letters[byte % letters.length]).join('');
	return `${text.slice(0, 4)}-${text.slice(4)}`;
}

const uuids = /[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}/g;

/** A value with every known id replaced, however deep. */
function renamed(value: unknown, ids: ReadonlyMap<string, string>): unknown {
	if (typeof value === 'string') return value.replace(uuids, (id) => ids.get(id) ?? id);
	if (Array.isArray(value)) return value.map((one) => renamed(one, ids));
	if (value === null || typeof value !== 'object' || value instanceof Date || Buffer.isBuffer(value))
		return value;
	return Object.fromEntries(Object.entries(value).map(([key, one]) => [key, renamed(one, ids)]));
}

async function copyRows(
	db: Database,
	table: PgTable,
	parent: Column,
	ids: Map<string, string>,
	parents: readonly string[]
): Promise<void> {
	const found: Row[] = await db
		.select()
		.from(table)
		.where(inArray(parent, [...parents]));
	if (found.length === 0) return;
	for (const row of found) if (typeof row.id === 'string') ids.set(row.id, randomUUID());
	const rows = found.map((row) => {
		const copy = renamed(row, ids) as Row;
		for (const [column, make] of Object.entries(fresh)) if (column in copy) copy[column] = make(copy);
		return copy;
	});
	await db.insert(table).values(rows as PgTable['$inferInsert'][]);
}

/** @returns the new id of each old one */
export async function copyDossiers(
	db: Database,
	dossierIds: readonly string[]
): Promise<ReadonlyMap<string, string>> {
	const ids = new Map<string, string>();
	await db.transaction(async (tx) => {
		const database = tx as unknown as Database;
		await copyRows(database, dossiers, dossiers.id, ids, dossierIds);
		for (const [table, parent] of below) await copyRows(database, table, parent, ids, [...ids.keys()]);
	});
	return ids;
}
