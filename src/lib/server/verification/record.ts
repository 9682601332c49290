import { z } from 'zod';
import { recompute } from '../../record';
import type { RecordDifference, RecordFinding, ReportIdentity } from './types';

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

/**
 * Computes every record again and compares it with what it states.
 * @param maxTrials over all records; above it nothing is computed, and the reason says so.
 */
export async function recomputeAll(
	attachment: ReportAttachment,
	maxTrials: number
): Promise<RecordFinding & { reasons: string[] }> {
	const trials = countTrials(attachment);
	const finding = {
		recomputed: true,
		figures: 0,
		differences: [] as RecordDifference[],
		reasons: [] as string[]
	};
	if (trials > maxTrials) {
		const reason = `The records ask for ${String(trials)} trials, more than are computed here; use the command instead.`;
		return { ...finding, recomputed: false, reasons: [reason] };
	}
	for (const [i, record] of attachment.records.entries()) {
		try {
			const one = await recompute(record);
			finding.recomputed &&= one.recomputed;
			finding.figures += one.figures;
			for (const difference of one.differences) {
				finding.differences.push({ ...difference, path: `/records/${String(i)}${difference.path}` });
			}
		} catch (error) {
			finding.recomputed = false;
			const why = error instanceof Error ? error.message : String(error);
			finding.reasons.push(`Record ${String(i + 1)} could not be computed again: ${why}`);
		}
	}
	return finding;
}
