import { z } from 'zod';
import type { ComputationRecord } from '../../calculation/types';
import { recompute } from '../../record';
import type { RecordFinding, ReportIdentity } from './types';

const maxRecords = 64;

const recordSchema = z.object({
	request: z.record(z.string(), z.unknown()),
	result: z.record(z.string(), z.unknown())
});

/** The file that is attached to every report. */
const attachmentSchema = z.object({
	format: z.literal('noonmark-record/1'),
	report: z.object({ number: z.string().max(64), revision: z.number().int(), code: z.string().max(32) }),
	records: z.array(recordSchema).max(maxRecords)
});

export type ReportAttachment = z.infer<typeof attachmentSchema>;

/** @returns undefined where the bytes are no record of this service. */
export function readAttachedRecord(bytes: Buffer): ReportAttachment | undefined {
	try {
		const text = new TextDecoder('utf-8', { fatal: true }).decode(bytes);
		return attachmentSchema.safeParse(JSON.parse(text)).data;
	} catch {
		return undefined;
	}
}

export const identityOf = (attachment: ReportAttachment): ReportIdentity => attachment.report;

/** Trials that the stored results say they took. */
function countTrials(attachment: ReportAttachment): number {
	const trials = attachment.records.map(({ result }) => {
		const evaluation = z.object({ evaluation: z.object({ trials: z.number() }) }).safeParse(result);
		return evaluation.data?.evaluation.trials ?? 0;
	});
	return trials.reduce((sum, n) => sum + n, 0);
}

export interface Recomputed extends RecordFinding {
	/** A figure or word came out otherwise, or a record could not be computed at all. */
	differs: boolean;
	reasons: string[];
}

/** Lets other requests of the process have their turn between two blocks of trials. */
const pause = (): Promise<void> => new Promise((resolve) => setImmediate(resolve));

/**
 * Computes every record again and compares it with what it states.
 * @param maxTrials over all records; above it nothing is computed, and the reason says so.
 */
export async function recomputeAll(attachment: ReportAttachment, maxTrials: number): Promise<Recomputed> {
	const trials = countTrials(attachment);
	const all: Recomputed = { recomputed: true, figures: 0, differences: [], differs: false, reasons: [] };
	if (trials > maxTrials) {
		const reason = `The records ask for ${String(trials)} trials, more than are computed here; use the command instead.`;
		return { ...all, recomputed: false, reasons: [reason] };
	}
	for (const [i, record] of attachment.records.entries()) {
		try {
			// The engine checks the request by itself and compares the result as plain JSON.
			const one = await recompute(record as unknown as ComputationRecord, { pause });
			all.figures += one.figures;
			for (const difference of one.differences) {
				all.differences.push({ ...difference, path: `/records/${String(i)}/result${difference.path}` });
			}
			all.differs ||= !one.recomputed;
		} catch (error) {
			all.differs = true;
			const why = error instanceof Error ? error.message : String(error);
			all.reasons.push(`Record ${String(i + 1)} could not be computed again: ${why}`);
		}
	}
	return { ...all, recomputed: !all.differs };
}
