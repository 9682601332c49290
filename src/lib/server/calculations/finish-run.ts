import { eq, sql } from 'drizzle-orm';
import type { ComputeRequest, ComputeResult } from '$lib/calculation/types';
import { canonicalJson, engineVersion } from '$lib/record';
import type { Queryable } from '../db';
import { runs } from '../db/schema';

/** What a finished run keeps: the record as the text that was hashed, and what computed it. */
export function finishedRun(request: ComputeRequest, result: ComputeResult) {
	return {
		record: canonicalJson({ request, result }),
		result,
		recordHash: result.record,
		state: 'done' as const,
		progress: 100,
		problem: null,
		engineVersion,
		nodeVersion: process.version
	};
}

/** Writes a run's result; a run that is done stays as it is. */
export async function storeResult(
	db: Queryable,
	runId: string,
	request: ComputeRequest,
	result: ComputeResult
): Promise<void> {
	await db
		.update(runs)
		.set({ ...finishedRun(request, result), finishedAt: sql`now()` })
		.where(sql`${eq(runs.id, runId)} and ${runs.state} <> 'done'`);
}
