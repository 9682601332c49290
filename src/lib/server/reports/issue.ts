import { X509Certificate } from 'node:crypto';
import { and, desc, eq, sql } from 'drizzle-orm';
import { engineVersion } from '$lib/record';
import { unmetDuties, type Duty, type ReportModel } from '$lib/report';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { requireExport } from '../billing/ledger';
import { database, type Database, type Queryable } from '../db';
import { issues, organisations, reports, users } from '../db/schema';
import { env } from '../env';
import { enqueue } from '../jobs/queue';
import { ensureOrganisationCertificate, rootPem } from '../signing/authority';
import { newCode } from './code';
import { getReport, type ReportView } from './load';
import { modelOf, requirePrintable } from './model';

export interface IssueView {
	id: string;
	state: 'queued' | 'rendering' | 'signing' | 'done' | 'failed';
	problem: string | null;
	code: string;
	sha256: string | null;
	size: number | null;
	requestedAt: Date;
	issuedAt: Date | null;
	/** What was frozen for print; the dossier and the calculations may have changed since. */
	printed: { addressee: string; results: string[] };
}

const columns = {
	id: issues.id,
	state: issues.state,
	problem: issues.problem,
	code: issues.code,
	sha256: issues.sha256,
	size: issues.size,
	requestedAt: issues.requestedAt,
	issuedAt: issues.issuedAt,
	model: issues.model
};

/** The issue of a report's present revision, or null while it has none. */
export async function issueOf(
	membership: Membership | null,
	report: Pick<ReportView, 'id' | 'revision'>,
	db: Queryable = database()
): Promise<IssueView | null> {
	requireAction(membership, 'report.read');
	const [row] = await db
		.select(columns)
		.from(issues)
		.innerJoin(reports, eq(reports.id, issues.reportId))
		.where(
			and(
				eq(issues.reportId, report.id),
				eq(issues.revision, report.revision),
				eq(issues.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId)
			)
		)
		.orderBy(desc(issues.requestedAt))
		.limit(1);
	if (row === undefined) return null;
	const { model, ...issue } = row;
	const { addressee, runs } = model as ReportModel;
	return {
		...issue,
		printed: {
			addressee: addressee === null ? 'none' : [addressee.name, addressee.contact].filter(Boolean).join(', '),
			results: runs.map(({ title }) => title)
		}
	};
}

/** What the report still owes its reader; empty where it may be issued. */
export async function dutiesOf(
	membership: Membership | null,
	report: ReportView,
	db: Queryable = database()
): Promise<Duty[]> {
	requireAction(membership, 'report.read');
	if (report.runIds.length === 0) {
		return [{ code: 'no-run', message: 'Choose at least one result to report.', place: 'runs' }];
	}
	const circumstances = { verification: null, issueDate: null, authoriser: null };
	return openDuties(await modelOf(membership, report, circumstances, db));
}

/** The report's own duties, and that every figure is one that this version of the code computes. */
function openDuties(model: ReportModel): Duty[] {
	const outdated = model.runs
		.filter((run) => run.engineVersion !== engineVersion)
		.map((run) => ({
			code: 'outdated-run',
			message: `“${run.title}” was computed by version ${run.engineVersion} of the computing code, and this is ${engineVersion}: compute it again.`,
			place: `run:${run.id}`
		}));
	return [...unmetDuties(model), ...outdated];
}

async function authoriserOf(membership: Membership, db: Queryable): Promise<{ name: string; role: string }> {
	const [person] = await db.select({ name: users.name }).from(users).where(eq(users.id, membership.userId));
	return { name: person?.name ?? 'a member', role: 'author' };
}

/**
 * Issues a report: freezes what is printed, and queues its rendering and signing. Asked for twice it is one issue;
 * after a failure it is tried again with the same code.
 * @returns the issue's id
 * @throws InvalidInputError while a duty is unmet, ForbiddenError where the organisation wants a second reader,
 * NoExportsError where no export is left: the report stays as it is.
 */
export async function issueReport(
	membership: Membership | null,
	id: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.issue');
	const seen = await getReport(membership, id, db);
	const root = new X509Certificate(await rootPem(db));
	// Made now, not by the worker: a certificate must be older than the time that the report states.
	await ensureOrganisationCertificate(db, membership.organisationId);
	const rootFingerprint = root.fingerprint256.replaceAll(':', '').toLowerCase();
	return db.transaction(async (tx) => {
		const [locked] = await tx
			.select({ state: reports.state })
			.from(reports)
			.where(eq(reports.id, id))
			.for('update');
		if (locked === undefined) throw new NotFoundError('report');
		const report = await getReport(membership, id, tx);
		const before = await issueOf(membership, report, tx);
		if (before !== null && before.state !== 'failed') return before.id;
		if (before === null && locked.state !== 'draft' && locked.state !== 'returned') {
			throw new ConflictError(`Report ${seen.number} is ${locked.state} and cannot be issued again.`);
		}
		await requireExport(tx, membership.organisationId);
		if (before !== null) return tryAgain(membership, before.id, tx);

		const [policy] = await tx
			.select({ selfApproval: organisations.selfApproval })
			.from(organisations)
			.where(eq(organisations.id, membership.organisationId));
		if (policy?.selfApproval !== true) {
			throw new ForbiddenError(
				'Your organisation requires a second reader’s approval before a report is issued.'
			);
		}
		const [clock] = (await tx.execute<{ now: string }>(sql`select now()::text as now`)).rows;
		const now = new Date(clock?.now ?? '');
		const code = newCode();
		const model: ReportModel = await modelOf(
			membership,
			report,
			{
				verification: { address: `${env().ORIGIN}/verify`, code, rootFingerprint },
				issueDate: now,
				authoriser: await authoriserOf(membership, tx)
			},
			tx
		);
		requirePrintable(model);
		const unmet = openDuties(model);
		if (unmet.length > 0) {
			throw new InvalidInputError(
				'The report still owes its reader something.',
				Object.fromEntries(unmet.map((duty) => [duty.place, duty.message]))
			);
		}
		const [row] = await tx
			.insert(issues)
			.values({
				organisationId: membership.organisationId,
				reportId: id,
				revision: report.revision,
				code,
				model,
				requestedBy: membership.userId
			})
			.returning({ id: issues.id });
		if (row === undefined) throw new Error('The issue was not stored.');
		await tx
			.update(reports)
			.set({ state: 'approved', updatedAt: sql`now()` })
			.where(eq(reports.id, id));
		await enqueue(tx, 'issue-report', { issueId: row.id }, { organisationId: membership.organisationId });
		await recordAudit(tx, membership, 'report.issue', id, { issue: row.id });
		return row.id;
	});
}

async function tryAgain(membership: Membership, issueId: string, tx: Queryable): Promise<string> {
	await tx.update(issues).set({ state: 'queued', problem: null }).where(eq(issues.id, issueId));
	await enqueue(tx, 'issue-report', { issueId }, { organisationId: membership.organisationId });
	return issueId;
}

/** The signed file of an issued report, for a member. @throws NotFoundError until it is there. */
export async function issuedFile(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<{ name: string; pdf: Buffer }> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	const [row] = await db
		.select({ pdf: issues.pdf })
		.from(issues)
		.innerJoin(reports, eq(reports.id, issues.reportId))
		.where(
			and(
				eq(issues.reportId, report.id),
				eq(issues.revision, report.revision),
				eq(issues.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId),
				eq(issues.state, 'done')
			)
		);
	if (!row?.pdf) throw new NotFoundError('file');
	return { name: `${report.number}-r${report.revision}.pdf`, pdf: row.pdf };
}
