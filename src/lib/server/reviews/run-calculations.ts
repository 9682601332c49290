import { inArray } from 'drizzle-orm';
import type { Queryable } from '../db';
import { runs } from '../db/schema';

/** For each run of a report, earlier or present, the calculation that it computed: by it a run finds its successor. */
export async function calculationsOfRuns(
	runIds: readonly string[],
	db: Queryable
): Promise<ReadonlyMap<string, string>> {
	const rows = await db
		.select({ id: runs.id, calculationId: runs.calculationId })
		.from(runs)
		.where(inArray(runs.id, [...new Set(runIds)]));
	return new Map(rows.map((row) => [row.id, row.calculationId]));
}
