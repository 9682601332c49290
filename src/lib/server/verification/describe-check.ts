import type { FileCheck } from './check-file';
import type { KnownReport } from './known';
import type { VerificationResult } from './types';

/** One row of the page: a name, what was found, and where to read on. */
export interface CheckRow {
	id: 'signature' | 'time' | 'coverage' | 'revision' | 'record';
	title: string;
	/** Bold first words, where the row needs the reader's attention. */
	lead?: string;
	text: string;
	link?: { href: string; text: string };
}

/** A check in words, as the page shows it. */
export interface CheckView {
	/** "TB-0412 revision 1"; empty where nothing vouches for a number. */
	subject: string;
	heading: string;
	rows: CheckRow[];
	/** The row that decides, where the notch stands. */
	decisive: CheckRow['id'];
	reasons: string[];
	good: boolean;
}

const date = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeZone: 'UTC' });
const time = new Intl.DateTimeFormat('en-GB', { dateStyle: 'medium', timeStyle: 'medium', timeZone: 'UTC' });

/** "19 Nov 2026" in UTC. */
export const writeDate = (at: Date): string => date.format(at);
const writeTime = (at: Date): string => `${time.format(at)} UTC`;

/** First and last bytes of a fingerprint: "5c:91…e0". */
function shorten(fingerprint: string): string {
	return `${fingerprint.slice(0, 2)}:${fingerprint.slice(2, 4)}…${fingerprint.slice(-2)}`;
}

function signatureRow({ verdict, signature }: VerificationResult): CheckRow {
	const row = { id: 'signature', title: 'Signature' } as const;
	if (signature === null)
		return { ...row, lead: 'none', text: verdict === 'altered' ? 'that can be read' : 'found' };
	const name = signature.signer ?? 'no name';
	const certificate = signature.certificate ? `, certificate ${shorten(signature.certificate)}` : '';
	if (!signature.valid) return { ...row, lead: 'does not hold', text: `; it names ${name}${certificate}` };
	if (signature.issuer !== 'trusted') {
		return {
			...row,
			lead: 'issuer unknown',
			text: `; it names ${name}${certificate}, which this service did not issue`
		};
	}
	return { ...row, text: `valid; ${name}${certificate}` };
}

function timeRow({ timestamp, signature }: VerificationResult): CheckRow {
	const row = { id: 'time', title: 'Time' } as const;
	if (timestamp === null) return { ...row, text: 'none stated that could be relied on' };
	const at = writeTime(new Date(timestamp.time));
	return {
		...row,
		text:
			signature?.valid === true
				? `${at}, claimed by the signer; no time-stamp authority`
				: `${at} is written in the file; nothing vouches for it`
	};
}

function coverageRow({ signature, coverage }: VerificationResult): CheckRow {
	const row = { id: 'coverage', title: 'Whole file' } as const;
	if (coverage === null || signature === null) return { ...row, text: 'no signature covers it' };
	if (coverage === 'partial') {
		return { ...row, lead: 'not whole', text: ': the file holds more, or less, than what was signed' };
	}
	if (!signature.valid)
		return {
			...row,
			lead: 'changed',
			text: ': the signature spans the file, but the file is not what was signed'
		};
	return { ...row, text: 'every byte is covered; nothing was added after signing' };
}

function revisionRow(known: KnownReport | null, result: VerificationResult): CheckRow {
	const row = { id: 'revision', title: 'Revision' } as const;
	if (known === null) {
		return result.verdict === 'genuine' || result.verdict === 'record-differs'
			? {
					...row,
					lead: 'not in the ledger',
					text: ' of this service: signed here, but no issue of this very file is recorded'
				}
			: { ...row, text: 'this very file is not in the ledger of issued reports' };
	}
	const newer = known.replacedBy;
	const link = newer
		? { href: `/verify/${newer.code}`, text: `Revision ${String(newer.revision)}` }
		: undefined;
	if (known.state === 'withdrawn')
		return { ...row, lead: 'withdrawn', text: ' by the organisation that issued it', link };
	if (newer) return { ...row, lead: `superseded on ${writeDate(newer.issuedAt)}`, text: '.', link };
	if (known.state === 'superseded') return { ...row, lead: 'superseded', text: ' by a later revision' };
	return {
		...row,
		text: `revision ${String(known.revision)}, issued on ${writeDate(known.issuedAt)}, is the current one`
	};
}

function recordRow({ record, verdict }: VerificationResult): CheckRow {
	const row = { id: 'record', title: 'Recomputed' } as const;
	if (record === null) {
		const why =
			verdict === 'not-a-report' || verdict === 'unreadable'
				? 'the file holds no record'
				: 'only what a valid signature of this service vouches for is computed again';
		return { ...row, text: why };
	}
	const numbers = record.differences.filter(({ stored }) => typeof stored === 'number').length;
	const count = `${String(Math.max(0, record.figures - numbers))} of ${String(record.figures)} figures equal to the last digit`;
	if (record.differences.length > 0) return { ...row, lead: 'differs', text: `; ${count}` };
	if (!record.recomputed) return { ...row, lead: 'not recomputed', text: '; the reason is below' };
	return { ...row, text: count };
}

function genuineHeading(known: KnownReport | null): string {
	if (known === null) return 'Signed by this service, but not in its ledger.';
	if (known.certificateRevokedAt) return 'Unchanged, but its certificate was revoked.';
	if (known.state === 'withdrawn') return 'Genuine and unchanged, but withdrawn.';
	if (known.replacedBy)
		return `Genuine and unchanged, but replaced by revision ${String(known.replacedBy.revision)}.`;
	if (known.state === 'superseded') return 'Genuine and unchanged, but replaced.';
	return 'Genuine and unchanged.';
}

const headings: Record<Exclude<VerificationResult['verdict'], 'genuine'>, string> = {
	'intact-issuer-unchecked': 'Unchanged; the issuer was not checked.',
	altered: 'Altered: this is not the file that was signed.',
	extended: 'Something was added after signing.',
	'issuer-unknown': 'Not issued by this service.',
	'record-differs': 'Unchanged, but its record does not compute to its figures.',
	'not-a-report': 'Not a signed report of this service.',
	unreadable: 'This file cannot be read.'
};

const decisiveRow: Record<VerificationResult['verdict'], CheckRow['id']> = {
	genuine: 'revision',
	'intact-issuer-unchecked': 'signature',
	altered: 'coverage',
	extended: 'coverage',
	'issuer-unknown': 'signature',
	'record-differs': 'record',
	'not-a-report': 'signature',
	unreadable: 'signature'
};

/** Puts a check into the words of the page. */
export function describeCheck({ result, identity, known, otherReport }: FileCheck): CheckView {
	const { verdict } = result;
	const named = known ?? (verdict === 'genuine' || verdict === 'record-differs' ? identity : null);
	const good =
		verdict === 'genuine' && known?.state === 'issued' && !otherReport && !known.certificateRevokedAt;
	const plainHeading = verdict === 'genuine' ? genuineHeading(known) : headings[verdict];
	return {
		subject: named ? `${named.number} revision ${String(named.revision)}` : '',
		heading: otherReport
			? `${plainHeading.replace(/\.$/, '')}, and not the report of this code.`
			: plainHeading,
		rows: [
			signatureRow(result),
			timeRow(result),
			coverageRow(result),
			revisionRow(known, result),
			recordRow(result)
		],
		decisive: decisiveRow[verdict],
		reasons: result.reasons,
		good
	};
}
