import type { X509Certificate } from 'node:crypto';
import { Certificate } from 'pkijs';
import { checkChain, readRoots, type Trust } from './chain';
import { checkCms, type CmsFinding } from './cms';
import { PdfError } from './pdf/values';
import { identityOf, readAttachedRecord, recomputeAll, type ReportAttachment } from './record';
import { classifyAddition, isEncrypted, readSignedRevision } from './revision';
import { readSignatureField, type SignatureField } from './signature-field';
import type {
	ReportIdentity,
	SignatureFinding,
	TimestampFinding,
	Verdict,
	VerificationResult
} from './types';

/** 25 MB; a long report with evidence has some hundred kilobytes. */
export const maxFileBytes = 25 * 1024 * 1024;

export interface VerificationOptions {
	/** The service's published root, or several, as PEM. */
	rootPem?: string;
	/** Trials over all records beyond which nothing is recomputed. */
	maxTrials?: number;
	/** Recompute only what a trusted signature vouches for: for a server that takes files from strangers. */
	onlyTrusted?: boolean;
	/** The time to judge by; now if left out. */
	now?: Date;
}

/** A result with what the signed record says the report is. */
export interface Examination {
	result: VerificationResult;
	identity: ReportIdentity | null;
}

const dayMs = 86_400_000;

const withoutSignature = (verdict: Verdict, ...reasons: string[]): Examination => ({
	result: { verdict, signature: null, timestamp: null, coverage: null, record: null, reasons },
	identity: null
});

/** What can be said before any signature is looked at. */
function refuse(bytes: Buffer): Examination | undefined {
	if (bytes.length === 0) return withoutSignature('unreadable', 'The file is empty.');
	if (bytes.length > maxFileBytes) {
		return withoutSignature('unreadable', 'The file is larger than 25 MB; no report of this service is.');
	}
	if (bytes.subarray(0, 1024).indexOf('%PDF-') < 0) {
		return withoutSignature('not-a-report', 'The file is not a PDF.');
	}
	if (isEncrypted(bytes)) {
		return withoutSignature('unreadable', 'The file is encrypted. Reports of this service never are.');
	}
	return undefined;
}

/** Common name of a certificate's subject, as written in it. */
function commonName(certificate: X509Certificate): string | null {
	const { subject } = Certificate.fromBER(Uint8Array.from(certificate.raw).buffer);
	const name = subject.typesAndValues.find(({ type }) => type === '2.5.4.3');
	return typeof name?.value.valueBlock.value === 'string' ? name.value.valueBlock.value : null;
}

function describe(signer: X509Certificate | undefined, valid: boolean, trust: Trust): SignatureFinding {
	return {
		valid,
		level: valid ? 'PAdES B-B' : null,
		signer: signer ? commonName(signer) : null,
		certificate: signer ? signer.fingerprint256.replaceAll(':', '').toLowerCase() : null,
		serial: signer ? signer.serialNumber.toLowerCase() : null,
		notBefore: signer ? new Date(signer.validFrom).toISOString() : null,
		notAfter: signer ? new Date(signer.validTo).toISOString() : null,
		issuer: trust
	};
}

interface Parts {
	field: SignatureField;
	cms: CmsFinding;
	/** Faults of frame, CMS and structure; with none the signature is valid. */
	faults: string[];
	attachment: ReportAttachment | undefined;
}

function inspect(bytes: Buffer, field: SignatureField): Parts {
	const cms = checkCms(field.cms, field.digest);
	const faults = [...field.faults, ...cms.faults];
	if (!cms.digestMatches && cms.signer !== undefined) {
		faults.unshift('The file is not what was signed: at least one byte of it was changed.');
	}
	const revision = readSignedRevision(bytes.subarray(0, field.signedEnd), field.objectOffset);
	if (field.claimedAt === undefined) faults.push('The signature states no time in the form reports use.');
	if (bytes.indexOf('%PDF-') !== 0) faults.push('Something stands before the beginning of the file.');
	const attachment = revision.record && readAttachedRecord(revision.record);
	return { field, cms, faults: [...faults, ...revision.faults], attachment };
}

/**
 * A signed PDF that is intact but has not the make of a report: not ours, rather than altered. One of our own
 * signatures around a file that cannot be read as a report is no such thing.
 */
function isForeign({ field, cms, attachment, faults }: Parts, trust: Trust): boolean {
	if (!cms.digestMatches) return false;
	const unknownForm = field.subFilter !== 'ETSI.CAdES.detached';
	return unknownForm || (attachment === undefined && (trust !== 'trusted' || faults.length === 0));
}

function judgeTime(
	field: SignatureField,
	now: Date
): { timestamp: TimestampFinding | null; faults: string[] } {
	if (field.claimedAt === undefined) return { timestamp: null, faults: [] };
	const timestamp: TimestampFinding = { time: field.claimedAt.toISOString(), source: 'signer' };
	const late = field.claimedAt.getTime() > now.getTime() + dayMs;
	return { timestamp, faults: late ? ['The signature claims a time that has not come yet.'] : [] };
}

const words: Record<Exclude<Verdict, 'altered' | 'unreadable' | 'not-a-report'>, string> = {
	genuine: 'The signature holds, leads to the given root and covers every byte of the file.',
	'intact-issuer-unchecked':
		'The signature holds and covers every byte of the file. Who issued it was not checked, since no root was given.',
	extended: 'Something was added to the file after it was signed. Read the original instead.',
	'issuer-unknown': 'The signature holds, but its certificate does not come from this service.',
	'record-differs': 'The attached record does not compute to the figures that it states.'
};

function decide(parts: Parts, trust: Trust, extended: boolean, differs: boolean): Verdict {
	if (parts.faults.length > 0) return 'altered';
	if (extended) return 'extended';
	if (trust === 'unknown') return 'issuer-unknown';
	if (differs) return 'record-differs';
	return trust === 'trusted' ? 'genuine' : 'intact-issuer-unchecked';
}

/**
 * Examines a file as a report: signature, coverage, issuer, attached record.
 * Nothing in the file can make it throw; it throws only where `rootPem` holds no certificate.
 */
export async function examineReport(
	input: Uint8Array,
	options: VerificationOptions = {}
): Promise<Examination> {
	const roots = options.rootPem === undefined ? undefined : readRoots(options.rootPem);
	const now = options.now ?? new Date();
	const bytes = Buffer.from(input.buffer, input.byteOffset, input.byteLength);
	const refused = refuse(bytes);
	if (refused) return refused;

	let field: SignatureField | undefined;
	try {
		field = readSignatureField(bytes);
	} catch (error) {
		if (!(error instanceof PdfError)) throw error;
		return withoutSignature('altered', 'The place of the signature is damaged.', error.message);
	}
	if (field === undefined) return unsigned(bytes);

	const parts = inspect(bytes, field);
	const { cms, attachment } = parts;
	const time = judgeTime(field, now);
	const chained = cms.signer && checkChain(cms.signer, cms.issuers, roots, field.claimedAt ?? now);
	const trust = time.faults.length > 0 ? 'unknown' : (chained ?? (roots ? 'unknown' : 'not-checked'));
	const valid = parts.faults.length === 0;
	const signature = describe(cms.signer, valid, trust);
	const extended = classifyAddition(bytes, field.signedEnd) === 'addition';
	const coverage = extended || field.digest === undefined ? 'partial' : 'whole';
	const found = { signature, timestamp: time.timestamp, coverage } as const;

	if (isForeign(parts, trust)) {
		const reason = 'The file is a signed PDF, but holds no record of this service: it is no report of it.';
		return {
			result: { verdict: 'not-a-report', ...found, record: null, reasons: [reason] },
			identity: null
		};
	}
	const wanted = valid && attachment && (trust === 'trusted' || options.onlyTrusted !== true);
	const recomputed = wanted ? await recomputeAll(attachment, options.maxTrials ?? Infinity) : null;
	const record = recomputed && {
		recomputed: recomputed.recomputed,
		figures: recomputed.figures,
		differences: recomputed.differences
	};
	const verdict = decide(parts, trust, extended, recomputed?.differs ?? false);
	const reasons = [
		...(verdict === 'altered' ? parts.faults : [words[verdict as keyof typeof words]]),
		...(extended && field.laterSignatures > 0 ? ['Another signature was added with it.'] : []),
		...time.faults,
		...(recomputed?.recomputed && recomputed.figures > 0
			? [
					`All ${String(recomputed.figures)} figures of the record were computed again and are equal to the last digit.`
				]
			: []),
		...(recomputed?.reasons ?? []),
		...(time.timestamp
			? ['The time is only claimed by the signer; no time-stamp authority vouches for it.']
			: [])
	];
	return {
		result: { verdict, ...found, record, reasons },
		identity: valid && attachment ? identityOf(attachment) : null
	};
}

/** A file without a signature: cut off, or simply no report. */
function unsigned(bytes: Buffer): Examination {
	if (bytes.lastIndexOf('startxref') < 0) {
		return withoutSignature('unreadable', 'The file ends before a PDF may end: it is damaged or cut off.');
	}
	return withoutSignature(
		'not-a-report',
		'The file carries no signature. A preview has none, and a report loses it when another program saves it anew.'
	);
}

/** The verdict on a file, with everything that led to it. See `examineReport`. */
export async function verifyReport(
	bytes: Uint8Array,
	options: VerificationOptions = {}
): Promise<VerificationResult> {
	return (await examineReport(bytes, options)).result;
}
