import { and, desc, eq, sql } from 'drizzle-orm';
import { compute } from '$lib/calculation/compute';
import { ProblemError } from '$lib/calculation/problem';
import { fieldOfProblem, toRequest } from '$lib/calculation/to-request';
import type { CalculationDraft } from '$lib/calculation/draft';
import type { ComputeRequest, ComputeResult } from '$lib/calculation/types';
import { methodById } from '$lib/methods';
import { engineVersion } from '$lib/record';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { InvalidInputError, NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { calculations, runs } from '../db/schema';
import { enqueue } from '../jobs/queue';
import { finishedRun } from './finish-run';
import { getCalculation } from './load';

/** Up to so many trials are computed while the page waits: a fraction of a second. More go to the queue. */
export const trialsAtOnce = 200_000;

export interface RunView {
	id: string;
	calculationId: string;
	state: 'queued' | 'running' | 'done' | 'failed';
	/** Per cent. */
	progress: number;
	problem: string | null;
	draft: CalculationDraft;
	request: ComputeRequest;
	result: ComputeResult | null;
	record: string | null;
	engineVersion: string | null;
	nodeVersion: string | null;
	createdAt: Date;
	finishedAt: Date | null;
}

const columns = {
	id: runs.id,
	calculationId: runs.calculationId,
	state: runs.state,
	progress: runs.progress,
	problem: runs.problem,
	draft: runs.draft,
	request: runs.request,
	result: runs.result,
	record: runs.record,
	engineVersion: runs.engineVersion,
	nodeVersion: runs.nodeVersion,
	createdAt: runs.createdAt,
	finishedAt: runs.finishedAt
};

/**
 * Computes a calculation as it stands, or queues it where that would keep the page waiting. The same draft asked for
 * twice is one run.
 * @returns the run's id
 * @throws InvalidInputError with the faults by field where the draft cannot be computed.
 */
export async function startRun(
	membership: Membership | null,
	calculationId: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'calculation.write');
	await limit(`run:${membership.userId}`, 120, 60, db);
	const { draft } = await getCalculation(membership, calculationId, db);
	const method = draft.method === null ? undefined : methodById(draft.method);
	if (method === undefined)
		throw new InvalidInputError('Choose a method first.', { form: 'Choose a method first.' });
	const { request, faults } = toRequest(draft, method);
	if (request === null) throw new InvalidInputError('Some answers are missing or unreadable.', faults);
	const same = await sameRun(membership, calculationId, draft, db);
	if (same !== undefined) return same;

	const trials = request.evaluation?.propagation === 'monte-carlo' ? request.evaluation.trials : 0;
	const atOnce = typeof trials === 'number' && trials <= trialsAtOnce;
	let finished: ReturnType<typeof finishedRun> | undefined;
	try {
		if (atOnce) finished = finishedRun(request, await compute(request));
		// A long one is tried small first, so that what cannot be computed is said at once and not by the queue.
		else await compute({ ...request, evaluation: { ...request.evaluation, trials: 10_000 } });
	} catch (cause) {
		if (!(cause instanceof ProblemError)) throw cause;
		throw new InvalidInputError(cause.message, { [fieldOfProblem(cause)]: cause.message });
	}
	return db.transaction(async (tx) => {
		const [row] = await tx
			.insert(runs)
			.values({
				organisationId: membership.organisationId,
				calculationId,
				draft,
				request,
				createdBy: membership.userId,
				...(finished === undefined ? { state: 'queued' as const } : { ...finished, finishedAt: sql`now()` })
			})
			.returning({ id: runs.id });
		if (row === undefined) throw new Error('The run was not stored.');
		if (finished === undefined) {
			await enqueue(tx, 'compute-run', { runId: row.id }, { organisationId: membership.organisationId });
		}
		await recordAudit(tx, membership, 'calculation.compute', calculationId, { run: row.id });
		return row.id;
	});
}

async function sameRun(
	membership: Membership,
	calculationId: string,
	draft: CalculationDraft,
	db: Queryable
): Promise<string | undefined> {
	const [latest] = await db
		.select({
			id: runs.id,
			state: runs.state,
			engineVersion: runs.engineVersion,
			same: sql<boolean>`${runs.draft} - 'visited' = ${JSON.stringify(draft)}::jsonb - 'visited'`
		})
		.from(runs)
		.innerJoin(calculations, eq(calculations.id, runs.calculationId))
		.where(
			and(
				eq(runs.calculationId, calculationId),
				eq(runs.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId)
			)
		)
		.orderBy(desc(runs.createdAt))
		.limit(1);
	if (latest?.same !== true || latest.state === 'failed') return undefined;
	// What an earlier version of the code computed need not be what this one would: it is computed anew.
	return latest.state !== 'done' || latest.engineVersion === engineVersion ? latest.id : undefined;
}

/** The newest run of a calculation, or null before the first. */
export async function latestRun(
	membership: Membership | null,
	calculationId: string,
	db: Queryable = database()
): Promise<RunView | null> {
	requireAction(membership, 'calculation.read');
	const [row] = await db
		.select(columns)
		.from(runs)
		.innerJoin(calculations, eq(calculations.id, runs.calculationId))
		.where(
			and(
				eq(runs.calculationId, calculationId),
				eq(runs.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId)
			)
		)
		.orderBy(desc(runs.createdAt))
		.limit(1);
	return row ?? null;
}

/** One run. @throws NotFoundError where it is not the organisation's. */
export async function getRun(
	membership: Membership | null,
	runId: string,
	db: Queryable = database()
): Promise<RunView> {
	requireAction(membership, 'calculation.read');
	const [row] = await db
		.select(columns)
		.from(runs)
		.innerJoin(calculations, eq(calculations.id, runs.calculationId))
		.where(
			and(
				eq(runs.id, runId),
				eq(runs.organisationId, membership.organisationId),
				inReach(membership, calculations.dossierId)
			)
		);
	if (row === undefined) throw new NotFoundError('run');
	return row;
}

/** Where a run stands, for the page that waits for it. */
export async function runProgress(
	membership: Membership | null,
	runId: string,
	db: Queryable = database()
): Promise<Pick<RunView, 'state' | 'progress' | 'problem'>> {
	const { state, progress, problem } = await getRun(membership, runId, db);
	return { state, progress, problem };
}
