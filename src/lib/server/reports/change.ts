import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm';
import { z } from 'zod';
import { storable } from '$lib/calculation/storable';
import { emptyReportText, type ReportText } from '$lib/report/text';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { organisations, reports } from '../db/schema';
import { findDossier } from '../dossiers/find';
import { touchDossier } from '../dossiers/touch';
import { getReport, runChoices, runsOf, type ReportView } from './load';
import { modelOf, unissued } from './model';

const long = z.string().max(20_000, 'At most 20 000 characters.').transform(storable);

const change = z.strictObject({
	title: z
		.string()
		.trim()
		.min(1, 'Title: give the report a title.')
		.max(200, 'Title: at most 200 characters.')
		.transform(storable),
	text: z.strictObject({
		question: long,
		background: long,
		answer: long,
		commentary: long,
		leftOut: long,
		commissionedBy: long,
		withoutAddressee: z.boolean().default(false)
	}),
	runIds: z.array(z.uuid()).max(20, 'A report shows at most 20 results.'),
	baseVersion: z.int().positive()
});

export type ReportChange = z.infer<typeof change>;

/** The next number of an organisation: prefix and four digits, in the order of making. */
async function nextNumber(membership: Membership, tx: Queryable): Promise<string> {
	// One at a time in an organisation: the row's lock is held to the end of the transaction.
	const [organisation] = await tx
		.select({ prefix: organisations.numberPrefix })
		.from(organisations)
		.where(eq(organisations.id, membership.organisationId))
		.for('update');
	if (organisation === undefined) throw new NotFoundError('organisation');
	const { rows } = await tx.execute<{ next: number }>(sql`
		select coalesce(max(substring(${reports.number} from '[0-9]+$')::int), 0) + 1 as next
		from ${reports} where ${reports.organisationId} = ${membership.organisationId}`);
	return `${organisation.prefix}-${String(rows[0]?.next ?? 1).padStart(4, '0')}`;
}

/**
 * A new draft report in a dossier, with the dossier's question.
 * @param runId a finished run to start from
 * @returns the report's id
 */
export async function createReport(
	membership: Membership | null,
	dossierId: string,
	given: { template: 'client-memo'; runId: string | null },
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.write');
	return db.transaction(async (tx) => {
		const dossier = await findDossier(tx, membership, dossierId);
		const runIds = given.runId === null ? [] : [given.runId];
		await runsOf(membership, runIds, dossierId, tx);
		await requireLiving(membership, dossierId, runIds, tx);
		const number = await nextNumber(membership, tx);
		const [row] = await tx
			.insert(reports)
			.values({
				organisationId: membership.organisationId,
				dossierId,
				number,
				template: given.template,
				title: dossier.title,
				text: { ...emptyReportText, question: dossier.question },
				runIds,
				createdBy: membership.userId,
				writers: [membership.userId]
			})
			.returning({ id: reports.id });
		if (row === undefined) throw new Error('The report was not stored.');
		if (runIds.length > 0) {
			const report = await getReport(membership, row.id, tx);
			const model = await modelOf(membership, report, unissued, tx);
			const text: ReportText = { ...report.text, answer: model.composedAnswer };
			await tx.update(reports).set({ text }).where(eq(reports.id, row.id));
		}
		await touchDossier(tx, membership, dossierId);
		await recordAudit(tx, membership, 'report.create', row.id, { number });
		return row.id;
	});
}

/** Results of a calculation that was put away are no longer taken into a report. */
async function requireLiving(
	membership: Membership,
	dossierId: string,
	added: readonly string[],
	db: Queryable
): Promise<void> {
	const living = await runChoices(membership, dossierId, [], db);
	const calculations = new Set(living.map(({ calculationId }) => calculationId));
	const chosen = await runsOf(membership, added, dossierId, db);
	if (chosen.some(({ run }) => !calculations.has(run.calculationId))) {
		throw new InvalidInputError('One of the results belongs to a deleted calculation.', {
			runs: 'One of the results belongs to a deleted calculation. Bring it back first, or choose another.'
		});
	}
}

/** What may still be written in: a draft, or one that came back. */
function requireOpen(report: ReportView): void {
	if (report.state === 'draft' || report.state === 'returned') return;
	const way =
		report.state === 'in-review'
			? 'is in review; take it back first to change it.'
			: report.state === 'approved'
				? 'is approved; open it again first to change it, which makes the approval void. Once its issue was asked for, a correction is a new revision.'
				: `is ${report.state}; it can no longer be changed. A correction is a new revision.`;
	throw new ConflictError(`Report ${report.number} ${way}`);
}

/**
 * The chosen results, each once, those chosen before in their order: a form sends them in the order of its list, and
 * the report leads with the first.
 */
function inStandingOrder(chosen: readonly string[], before: readonly string[]): string[] {
	return [...new Set([...before.filter((id) => chosen.includes(id)), ...chosen])];
}

/**
 * Saves title, text and chosen results of a draft.
 * @returns the new version
 * @throws ConflictError where somebody saved since, InvalidInputError with faults by field.
 */
export async function saveReport(
	membership: Membership | null,
	id: string,
	given: unknown,
	db: Database = database()
): Promise<number> {
	requireAction(membership, 'report.write');
	const before = await getReport(membership, id, db);
	requireOpen(before);
	const parsed = change.safeParse(given);
	if (!parsed.success) {
		const faults: Record<string, string> = {};
		for (const issue of parsed.error.issues) {
			faults[issue.path.filter((part) => part !== 'text').join('.') || 'form'] ??= issue.message;
		}
		throw new InvalidInputError('Please look at this again.', faults);
	}
	const { title, text, runIds, baseVersion } = parsed.data;
	return db.transaction(async (tx) => {
		// First, because whoever reviews or issues holds the dossier before the report.
		await touchDossier(tx, membership, before.dossier.id);
		await runsOf(membership, runIds, before.dossier.id, tx);
		const [locked] = await tx
			.select({ version: reports.version, state: reports.state, runIds: reports.runIds })
			.from(reports)
			.where(eq(reports.id, id))
			.for('update');
		if (locked === undefined) throw new NotFoundError('report');
		requireOpen({ ...before, state: locked.state });
		const added = runIds.filter((run) => !locked.runIds.includes(run));
		await requireLiving(membership, before.dossier.id, added, tx);
		if (locked.version !== baseVersion) {
			throw new ConflictError(
				'This report was saved elsewhere since you opened it. Copy what you typed, then reload to see the newer version.'
			);
		}
		await tx
			.update(reports)
			.set({
				title,
				text,
				runIds: inStandingOrder(runIds, locked.runIds),
				writers: sql`case when ${membership.userId}::uuid = any(${reports.writers}) then ${reports.writers}
					else array_append(${reports.writers}, ${membership.userId}::uuid) end`,
				version: baseVersion + 1,
				updatedAt: sql`now()`
			})
			.where(eq(reports.id, id));
		return baseVersion + 1;
	});
}

/** Puts a draft away; an issued report stays. @returns its number */
export async function deleteReport(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<{ number: string; dossierId: string }> {
	requireAction(membership, 'report.write');
	const report = await getReport(membership, id, db);
	requireOpen(report);
	await db.transaction(async (tx) => {
		const put = await tx
			.update(reports)
			.set({ deletedAt: sql`now()` })
			.where(and(eq(reports.id, id), isNull(reports.deletedAt), eq(reports.state, report.state)))
			.returning({ id: reports.id });
		if (put.length === 0) throw new ConflictError('The report was changed meanwhile; look again.');
		await recordAudit(tx, membership, 'report.delete', id);
	});
	return { number: report.number, dossierId: report.dossier.id };
}

/** Number of a report that was put away, for the notice that offers to bring it back; undefined for any other. */
export async function deletedReportNumber(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<string | undefined> {
	requireAction(membership, 'report.read');
	const [row] = await db
		.select({ number: reports.number })
		.from(reports)
		.where(
			and(
				eq(reports.id, id),
				eq(reports.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				isNotNull(reports.deletedAt)
			)
		);
	return row?.number;
}

/** Undoes a deletion. */
export async function restoreReport(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'report.write');
	await db.transaction(async (tx) => {
		const back = await tx
			.update(reports)
			.set({ deletedAt: null })
			.where(
				and(
					eq(reports.id, id),
					eq(reports.organisationId, membership.organisationId),
					inReach(membership, reports.dossierId),
					isNotNull(reports.deletedAt)
				)
			)
			.returning({ id: reports.id });
		if (back.length === 0) throw new NotFoundError('report');
		await recordAudit(tx, membership, 'report.restore', id);
	});
}
