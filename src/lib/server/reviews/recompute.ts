import { and, desc, eq } from 'drizzle-orm';
import { z } from 'zod';
import type { ComputationRecord } from '$lib/calculation/types';
import { recompute } from '$lib/record';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { database, type Database, type Queryable } from '../db';
import { auditEvents, runs } from '../db/schema';
import { getReport, runsOf, type ReportView } from '../reports/load';
import type { RecomputationView } from './types';

/** As many trials as the verification page computes; the command has no such bound. */
const mostTrials = 4_000_000;

/** Lets other requests of the process have their turn between two blocks of trials. */
const pause = (): Promise<void> => new Promise((resolve) => setImmediate(resolve));

const action = 'report.recompute';

/** The record as it was sealed; text, because the database's own JSON loses order and form. */
function recordOf({ record, request, result }: typeof runs.$inferSelect): ComputationRecord {
	if (record !== null) return JSON.parse(record) as ComputationRecord;
	if (result === null) throw new Error('A finished run has no result.');
	return { request, result };
}

type OneRun = RecomputationView['runs'][number];

async function again(loaded: { run: typeof runs.$inferSelect; title: string }): Promise<OneRun> {
	const head = { runId: loaded.run.id, title: loaded.title };
	try {
		const { recomputed, figures, differences } = await recompute(recordOf(loaded.run), { pause });
		return { ...head, figures, same: recomputed, differences, problem: null };
	} catch (error) {
		const why = error instanceof Error ? error.message : String(error);
		const problem = `It could not be computed again: ${why}`;
		return { ...head, figures: 0, same: false, differences: [], problem };
	}
}

/** Computes every record of the report again and compares it with what is stored. */
export async function recomputeReport(
	membership: Membership | null,
	reportId: string,
	db: Database = database()
): Promise<RecomputationView> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	await limit(`review-recompute:${membership.userId}`, 10, 60, db);
	const loaded = await runsOf(membership, report.runIds, report.dossier.id, db);
	const trials = loaded.reduce((sum, { run }) => sum + (run.result?.evaluation.trials ?? 0), 0);
	if (trials > mostTrials) {
		return {
			done: false,
			same: false,
			figures: 0,
			runs: [],
			problem: `The records ask for ${trials} trials together, more than are computed while a page waits. Use the command on the exported record instead.`
		};
	}
	const computed: OneRun[] = [];
	for (const run of loaded) computed.push(await again(run));
	const same = computed.every((run) => run.same);
	const figures = computed.reduce((sum, run) => sum + run.figures, 0);
	await recordAudit(db, membership, action, report.id, { same, figures, runs: report.runIds });
	return {
		done: computed.every(({ problem }) => problem === null),
		same,
		figures,
		runs: computed,
		problem: computed.length === 0 ? 'The report holds no result yet.' : null
	};
}

const noted = z.object({ same: z.boolean(), figures: z.number(), runs: z.array(z.string()) });

/** When this person last had the report's present results computed again; null where never. */
export async function lastRecomputation(
	userId: string,
	report: Pick<ReportView, 'id' | 'runIds'>,
	db: Queryable
): Promise<{ at: Date; same: boolean; figures: number } | null> {
	const [row] = await db
		.select({ at: auditEvents.at, detail: auditEvents.detail })
		.from(auditEvents)
		.where(
			and(eq(auditEvents.subject, report.id), eq(auditEvents.userId, userId), eq(auditEvents.action, action))
		)
		.orderBy(desc(auditEvents.at))
		.limit(1);
	const detail = noted.safeParse(row?.detail).data;
	if (row === undefined || detail === undefined) return null;
	const ofNow =
		detail.runs.length === report.runIds.length && report.runIds.every((id) => detail.runs.includes(id));
	return ofNow ? { at: row.at, same: detail.same, figures: detail.figures } : null;
}
