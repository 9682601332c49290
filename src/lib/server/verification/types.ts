/** What verification says of a file. The command prints exactly this; the page puts it into words. */

export const verdicts = [
	'genuine',
	'intact-issuer-unchecked',
	'altered',
	'extended',
	'issuer-unknown',
	'record-differs',
	'not-a-report',
	'unreadable'
] as const;

/**
 * - `genuine`: signed by this service's authority, whole and unchanged, and its record recomputes
 * - `intact-issuer-unchecked`: the same, but no root was given to check the issuer against
 * - `altered`: what was signed is not what the file holds
 * - `extended`: the signed part is intact, and something was added behind it
 * - `issuer-unknown`: the signature holds, but does not lead to the given root
 * - `record-differs`: the attached record does not recompute to its own figures
 * - `not-a-report`: no signed report of this service
 * - `unreadable`: nothing can be said: encrypted, damaged, empty or too large
 */
export type Verdict = (typeof verdicts)[number];

export interface SignatureFinding {
	/** Digest, signed attributes, certificates and signature value all hold. */
	valid: boolean;
	/** Level of the signature format. */
	level: 'PAdES B-B' | null;
	/** Name in the signing certificate. */
	signer: string | null;
	/** SHA-256 of the signing certificate, lower-case hexadecimal. */
	certificate: string | null;
	serial: string | null;
	notBefore: string | null;
	notAfter: string | null;
	/** Whether the chain leads to the given root. */
	issuer: 'trusted' | 'unknown' | 'not-checked';
}

export interface TimestampFinding {
	/** ISO 8601. */
	time: string;
	/** `signer`: only claimed by the signer, with no time-stamp authority behind it. */
	source: 'signer';
}

export type Coverage = 'whole' | 'whole-and-revocation-data' | 'partial';

export interface RecordDifference {
	/** JSON Pointer into record.json. */
	path: string;
	stored: unknown;
	recomputed: unknown;
}

export interface RecordFinding {
	/** True where every record in the file was computed again and came out exactly as stated. */
	recomputed: boolean;
	/** Number of figures compared. */
	figures: number;
	differences: RecordDifference[];
}

export interface VerificationResult {
	verdict: Verdict;
	signature: SignatureFinding | null;
	timestamp: TimestampFinding | null;
	coverage: Coverage | null;
	record: RecordFinding | null;
	/** Plain words, most important first. */
	reasons: string[];
}

/** What the signed record says the report is; to be believed only with a verdict that vouches for it. */
export interface ReportIdentity {
	number: string;
	revision: number;
	code: string;
}
