import { and, asc, eq, isNull, sql } from 'drizzle-orm';
import { z } from 'zod';
import { storable } from '$lib/calculation/storable';
import { methodById } from '$lib/methods';
import type { OutputSpec } from '$lib/methods/types';
import { loadUnits } from '$lib/quantities';
import { parseNumber } from '$lib/quantities/parse-number';
import { comparisonSentence, figureNumbers, figureText } from '$lib/report';
import { outputsOf } from '$lib/wording';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable, type Transaction } from '../db';
import { reports, reviewerFigures } from '../db/schema';
import { getReport, runsOf, type ReportView } from '../reports/load';
import { faultsOf } from './faults';
import { holdReport } from './hold';
import { handsIn, namesOf } from './people';
import { ownWorkRefusal, selfApprovalAllowed } from './policy';
import type { FigureView } from './types';

/** As typed. */
export interface FigureInput {
	runId: string;
	output: string;
	kind: 'value' | 'upper-bound' | 'lower-bound';
	value: string;
	unit: string;
	/** May stay empty. */
	giveOrTake: string;
	/** What the figure averages, in words; may stay empty, and is then said to be unknown. */
	averages: string;
	/** By which other route it was found. */
	route: string;
}

const short = (most: number) =>
	z.string().trim().max(most, `At most ${most} characters.`).transform(storable);

const figure = z.strictObject({
	runId: z.uuid('Choose the result that it stands beside.'),
	output: short(100),
	kind: z.enum(['value', 'upper-bound', 'lower-bound'], 'Say whether it is a value or a bound.'),
	value: short(60),
	unit: short(40),
	giveOrTake: short(60),
	averages: short(300),
	route: short(1000).refine((text) => text !== '', 'Say by which route you found it.')
});

type LoadedRun = Awaited<ReturnType<typeof runsOf>>[number];

function outputOf({ run }: LoadedRun, id: string): { spec: OutputSpec; unit: string } | undefined {
	const method = methodById(run.request.method);
	const output = run.result?.outputs[id];
	const spec = method && run.result ? outputsOf(method, run.result).find((one) => one.id === id) : undefined;
	return spec === undefined || output === undefined ? undefined : { spec, unit: output.unit };
}

function fault(field: string, message: string): InvalidInputError {
	return new InvalidInputError('Please look at this again.', { [field]: message });
}

/** @throws InvalidInputError by field where the figure cannot stand beside the output */
async function requireFits(given: FigureInput, run: LoadedRun | undefined): Promise<void> {
	const output = run && outputOf(run, given.output);
	if (output === undefined) throw fault('output', 'Choose a result of this report.');
	const value = parseNumber(given.value);
	if (!value.ok) throw fault('value', value.reason);
	if (given.giveOrTake !== '') {
		if (given.kind !== 'value') {
			throw fault('giveOrTake', 'A bound has no give or take: enter the bound that you stand by.');
		}
		const around = parseNumber(given.giveOrTake);
		if (!around.ok) throw fault('giveOrTake', around.reason);
		if (around.value < 0) throw fault('giveOrTake', 'Give or take is a width: enter it without a sign.');
	}
	await loadUnits([given.unit]);
	if (figureNumbers(given, output.spec, output.unit) === undefined) {
		const own = output.unit === '' ? 'a pure number' : `in ${output.unit}`;
		throw fault('unit', `The result is ${own}; “${given.unit}” does not convert to that.`);
	}
}

const figureFields = ['runId', 'output', 'kind', 'value', 'unit', 'giveOrTake', 'averages', 'route'] as const;

const sameFigure = (given: FigureInput) => figureFields.map((name) => eq(reviewerFigures[name], given[name]));

/** Figures are part of what is reviewed: they are entered and taken back while it is. */
async function requireReviewing(
	tx: Transaction,
	membership: Membership,
	seen: ReportView
): Promise<ReportView> {
	const report = await holdReport(tx, membership, seen);
	if (report.state !== 'in-review') {
		throw new ConflictError(
			`Report ${report.number} is not in review now: a reviewer’s figure is entered or taken back only while it is.`
		);
	}
	return report;
}

/**
 * Keeps a reviewer's own figure beside a result, while the report is in review.
 * @returns its id
 * @throws InvalidInputError with faults by field; ForbiddenError for one who had a hand in the report, where the
 * organisation wants a second reader
 */
export async function enterFigure(
	membership: Membership | null,
	reportId: string,
	given: FigureInput,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.review');
	const seen = await getReport(membership, reportId, db);
	await limit(`review-figure:${membership.userId}`, 60, 600, db);
	const parsed = figure.safeParse(given);
	if (!parsed.success) throw faultsOf(parsed.error);
	const input = parsed.data;
	return db.transaction(async (tx) => {
		const report = await requireReviewing(tx, membership, seen);
		const own = (await handsIn(report, tx)).has(membership.userId);
		if (own && !(await selfApprovalAllowed(membership.organisationId, tx))) {
			throw new ForbiddenError(ownWorkRefusal);
		}
		const runs = await runsOf(membership, report.runIds, report.dossier.id, tx);
		await requireFits(
			input,
			runs.find(({ run }) => run.id === input.runId)
		);
		// A form that is sent twice enters one figure: the report's row is held, so the second finds the first.
		const [entered] = await tx
			.select({ id: reviewerFigures.id })
			.from(reviewerFigures)
			.where(
				and(
					eq(reviewerFigures.reportId, report.id),
					eq(reviewerFigures.revision, report.revision),
					eq(reviewerFigures.enteredBy, membership.userId),
					isNull(reviewerFigures.withdrawnAt),
					...sameFigure(input)
				)
			);
		if (entered !== undefined) return entered.id;
		const [row] = await tx
			.insert(reviewerFigures)
			.values({
				...input,
				organisationId: membership.organisationId,
				reportId: report.id,
				revision: report.revision,
				enteredBy: membership.userId
			})
			.returning({ id: reviewerFigures.id });
		if (row === undefined) throw new Error('The figure was not stored.');
		await recordAudit(tx, membership, 'report.figure', report.id, { figure: row.id });
		return row.id;
	});
}

/** Takes one's own figure back, while the report is in review: kept, no longer printed. @returns the report's id */
export async function withdrawFigure(
	membership: Membership | null,
	figureId: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.review');
	const [found] = await db
		.select({ reportId: reviewerFigures.reportId, enteredBy: reviewerFigures.enteredBy })
		.from(reviewerFigures)
		.innerJoin(reports, eq(reports.id, reviewerFigures.reportId))
		.where(
			and(
				eq(reviewerFigures.id, figureId),
				eq(reviewerFigures.organisationId, membership.organisationId),
				inReach(membership, reports.dossierId)
			)
		);
	if (found === undefined) throw new NotFoundError('figure');
	const seen = await getReport(membership, found.reportId, db);
	if (found.enteredBy !== membership.userId) {
		throw new ForbiddenError('Only the reviewer who entered a figure takes it back.');
	}
	await db.transaction(async (tx) => {
		const report = await requireReviewing(tx, membership, seen);
		await tx
			.update(reviewerFigures)
			.set({ withdrawnAt: sql`now()` })
			.where(and(eq(reviewerFigures.id, figureId), isNull(reviewerFigures.withdrawnAt)));
		await recordAudit(tx, membership, 'report.figure-withdraw', report.id, { figure: figureId });
	});
	return found.reportId;
}

/** The figures of the present revision, those taken back included, oldest first. */
export async function listFigures(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<FigureView[]> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	const rows = await db
		.select()
		.from(reviewerFigures)
		.where(and(eq(reviewerFigures.reportId, report.id), eq(reviewerFigures.revision, report.revision)))
		.orderBy(asc(reviewerFigures.enteredAt), asc(reviewerFigures.id));
	if (rows.length === 0) return [];
	await loadUnits(rows.map(({ unit }) => unit));
	const runs = await runsOf(membership, report.runIds, report.dossier.id, db);
	const { organisationId, id: dossierId } = report.dossier;
	const person = await namesOf(
		organisationId,
		dossierId,
		rows.map(({ enteredBy }) => enteredBy),
		db
	);
	return rows.map((row) => {
		const loaded = runs.find(({ run }) => run.id === row.runId);
		const { id, runId, output, kind, value, unit, giveOrTake, averages, route } = row;
		const by = person(row.enteredBy);
		const spec = loaded && outputOf(loaded, output)?.spec;
		const result = loaded?.run.result?.outputs[output];
		const mine = row.enteredBy === membership.userId && row.withdrawnAt === null;
		return {
			id,
			runId,
			runTitle: loaded?.title ?? 'a result that the report no longer holds',
			output,
			outputName: spec?.name ?? output,
			kind,
			figure: figureText(row),
			value,
			unit,
			giveOrTake,
			averages,
			route,
			by,
			enteredAt: row.enteredAt,
			withdrawnAt: row.withdrawnAt,
			sentence:
				loaded && spec && result
					? comparisonSentence({ ...row, by }, spec, result, loaded.run.draft.temperatureUnit)
					: 'The result that it stood beside is no longer in the report: it is kept, and not printed.',
			mayWithdraw: mine && report.state === 'in-review'
		};
	});
}
