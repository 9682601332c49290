import { createHash } from 'node:crypto';
import type { Database } from '../db';
import { rootPem } from '../signing/authority';
import { describeCheck, type CheckView } from '../verification/describe-check';
import { findKnownFile, type KnownReport } from '../verification/known';
import { examineReport, type Examination } from '../verification';

/**
 * Trials over all records of a file beyond which the page leaves recomputation to the command, as where a file is
 * checked: some seconds of one processor, taken in turns with other requests.
 */
export const mostTrials = 4_000_000;

/** A file is examined again after this time: a certificate may have come to its end meanwhile. */
const keptMs = 60 * 60_000;
const mostKept = 200;

interface Kept {
	at: Date;
	examination: Promise<Examination>;
}

const kept = new Map<string, Kept>();

/** Examines a file, or says what was found less than an hour ago; asked for many times at once it is examined once. */
function examine(sha256: string, pdf: Buffer, db: Database, now: Date): Kept {
	const before = kept.get(sha256);
	if (before !== undefined && now.getTime() - before.at.getTime() < keptMs) return before;
	const examination = rootPem(db).then((root) =>
		examineReport(pdf, { rootPem: root, onlyTrusted: true, maxTrials: mostTrials })
	);
	const entry = { at: now, examination };
	kept.delete(sha256);
	kept.set(sha256, entry);
	// What failed is tried again by the next reader.
	examination.catch(() => {
		if (kept.get(sha256) === entry) kept.delete(sha256);
	});
	const oldest = kept.size > mostKept ? kept.keys().next().value : undefined;
	if (oldest !== undefined) kept.delete(oldest);
	return entry;
}

export interface SharedVerdict extends CheckView {
	/** When the signature was checked and the record computed again. */
	checkedAt: Date;
	/** Null where exactly this file is in no ledger of this service. */
	known: KnownReport | null;
	/** False where its trials are more than are computed for a page. */
	recomputed: boolean;
	/** SHA-256 of the very bytes that the reader can download, as worked out now. */
	sha256: string;
}

/**
 * What the verifier says of a stored file. The digest is taken of the bytes as they are stored now, and the ledger is
 * asked anew each time; only the examination of bytes that have not changed may be up to an hour old.
 */
export async function verdictOf(pdf: Buffer, db: Database, now = new Date()): Promise<SharedVerdict> {
	const sha256 = createHash('sha256').update(pdf).digest('hex');
	const { at, examination } = examine(sha256, pdf, db, now);
	const [{ result, identity }, known] = await Promise.all([examination, findKnownFile(sha256, db)]);
	return {
		...describeCheck({ result, identity, known: known ?? null, otherReport: false }),
		checkedAt: at,
		known: known ?? null,
		recomputed: result.record?.recomputed === true,
		sha256
	};
}
