import { X509Certificate } from 'node:crypto';
import { and, desc, eq, sql } from 'drizzle-orm';
import type { Duty, ReportModel } from '$lib/report';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { requireExport } from '../billing/ledger';
import { lockOrganisation } from '../billing/standing';
import { database, type Database, type Queryable, type Transaction } from '../db';
import { issues, reports, users } from '../db/schema';
import { env } from '../env';
import { enqueue } from '../jobs/queue';
import { holdReport } from '../reviews/hold';
import { ensureOrganisationCertificate, rootPem } from '../signing/authority';
import { authorisationOf } from './authorise';
import { newCode } from './code';
import { getReport, type ReportView } from './load';
import { modelOf, requirePrintable, unissued, type Circumstances } from './model';
import { openDuties } from './open-duties';

export interface IssueView {
	id: string;
	state: 'queued' | 'rendering' | 'signing' | 'done' | 'failed';
	problem: string | null;
	/** `no-exports` is mended by paying, anything else by trying again; null where nothing failed. */
	problemKind: 'no-exports' | 'fault' | null;
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
	problemKind: issues.problemKind,
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
	return openDuties(await modelOf(membership, report, unissued, db));
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
 * ConflictError while it is in review or returned, or where its approval does not hold any more (it is void then),
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
	const under = await issueOf(membership, seen, db);
	if (under !== null && under.state !== 'failed') return under.id;
	const outcome = await db.transaction(async (tx): Promise<{ id: string } | { voided: string }> => {
		// The organisation's row before all others, as everywhere: an export is counted under it.
		await lockOrganisation(tx, membership.organisationId);
		const report = await holdReport(tx, membership, seen);
		const before = await issueOf(membership, report, tx);
		if (before !== null && before.state !== 'failed') return { id: before.id };
		const authorised = await authorisationOf(membership, report, tx);
		if ('voided' in authorised) return authorised;
		await requireExport(tx, membership.organisationId);
		const code = before?.code ?? newCode();
		const verification = { address: `${env().ORIGIN}/verify`, code, rootFingerprint };
		const model = await issuedModel(membership, report, { verification, review: authorised.review }, tx);
		const issueId = await queueIssue(membership, report, { code, model, failed: before?.id ?? null }, tx);
		return { id: issueId };
	});
	if ('id' in outcome) return outcome.id;
	throw new ConflictError(
		`The approval of report ${seen.number} does not hold any more. ${outcome.voided} It is a draft again: send it for review.`
	);
}

/** The database's clock, which every process shares. */
async function presentTime(tx: Transaction): Promise<Date> {
	const [clock] = (await tx.execute<{ now: string }>(sql`select now()::text as now`)).rows;
	return new Date(clock?.now ?? '');
}

/**
 * What will be printed, with the day and the name of this moment.
 * @throws InvalidInputError with what is owed by place
 */
async function issuedModel(
	membership: Membership,
	report: ReportView,
	given: Pick<Circumstances, 'verification' | 'review'>,
	tx: Transaction
): Promise<ReportModel> {
	const model = await modelOf(
		membership,
		report,
		{
			...given,
			state: 'issued',
			issueDate: await presentTime(tx),
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
	return model;
}

/** Stores what will be printed and queues its rendering. After a failure it is the same issue with the same code. */
async function queueIssue(
	membership: Membership,
	report: Pick<ReportView, 'id' | 'revision'>,
	given: { code: string; model: ReportModel; failed: string | null },
	tx: Transaction
): Promise<string> {
	const { organisationId, userId } = membership;
	const { code, model } = given;
	const frozen = { model, requestedBy: userId, requestedAt: sql`now()` };
	const [row] =
		given.failed === null
			? await tx
					.insert(issues)
					.values({ organisationId, reportId: report.id, revision: report.revision, code, ...frozen })
					.returning({ id: issues.id })
			: await tx
					.update(issues)
					.set({ state: 'queued', problem: null, problemKind: null, ...frozen })
					.where(eq(issues.id, given.failed))
					.returning({ id: issues.id });
	if (row === undefined) throw new Error('The issue was not stored.');
	await tx
		.update(reports)
		.set({ state: 'approved', updatedAt: sql`now()` })
		.where(and(eq(reports.id, report.id), inReach(membership, reports.dossierId)));
	await enqueue(tx, 'issue-report', { issueId: row.id }, { organisationId });
	await recordAudit(tx, membership, 'report.issue', report.id, { issue: row.id });
	return row.id;
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
