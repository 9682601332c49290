import { and, eq, ne } from 'drizzle-orm';
import { ProblemError } from '../../../calculation/problem';
import type { ComputeRequest, ComputeResult } from '../../../calculation/types';
import { storeResult } from '../../calculations/finish-run';
import { runs } from '../../db/schema';
import { PermanentJobError, type JobDefinition } from '../job';

/**
 * Computes a request without holding up this process for longer than a moment at a time.
 * @throws ProblemError where the request cannot be computed.
 */
export type ComputeBeside = (
	request: ComputeRequest,
	options: { signal: AbortSignal; onProgress: (fraction: number) => void }
) => Promise<ComputeResult>;

const progressMilliseconds = 500;

/** Computes a queued run and keeps its record. A run that is over, or gone with its calculation, is left alone. */
export function computeRunJob(compute: ComputeBeside): JobDefinition<'compute-run'> {
	return {
		async handle({ runId }, context) {
			const [run] = await context.db
				.select({ request: runs.request, state: runs.state })
				.from(runs)
				.where(eq(runs.id, runId));
			if (run === undefined || run.state === 'done' || run.state === 'failed') return;
			const show = (values: Partial<typeof runs.$inferInsert>) =>
				context.guarded(async (tx) => {
					await tx
						.update(runs)
						.set({ ...values, state: 'running' })
						.where(and(eq(runs.id, runId), ne(runs.state, 'done')));
				});
			await show({ progress: 0, problem: null });

			let shown = Date.now();
			let showing: Promise<void> = Promise.resolve();
			const onProgress = (fraction: number) => {
				if (Date.now() - shown < progressMilliseconds) return;
				shown = Date.now();
				const progress = Math.min(99, Math.floor(fraction * 100));
				showing = showing
					.then(() => show({ progress }))
					// The lease renewal notices a lost hold; a progress that cannot be shown stops no computation.
					.catch((error: unknown) => context.log.warn({ err: error }, 'progress not written'));
			};
			const result = await compute(run.request, { signal: context.signal, onProgress }).catch(
				(error: unknown) => {
					if (error instanceof ProblemError) throw new PermanentJobError(error.message, { cause: error });
					throw error;
				}
			);
			await showing;
			await context.finish((tx) => storeResult(tx, runId, run.request, result));
		},
		async abandon({ runId }, problem, tx) {
			await tx
				.update(runs)
				.set({ state: 'failed', problem })
				.where(and(eq(runs.id, runId), ne(runs.state, 'done')));
		}
	};
}
