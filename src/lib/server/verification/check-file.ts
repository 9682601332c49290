import { createHash } from 'node:crypto';
import { limit, sourceOf } from '../access/limit';
import { InvalidInputError } from '../access/errors';
import { database, type Database } from '../db';
import { rootPem } from '../signing/authority';
import { findByCode, findKnownFile, type KnownReport } from './known';
import { examineReport, maxFileBytes } from './verify-report';
import type { ReportIdentity, VerificationResult } from './types';

/** Beyond this the page leaves recomputation to the command: some seconds of one processor. */
const maxTrials = 4_000_000;

/** Everything that the page says about a file. */
export interface FileCheck {
	result: VerificationResult;
	/** What the signed record calls itself. */
	identity: ReportIdentity | null;
	/** The ledger's entry of exactly this file. */
	known: KnownReport | null;
	/** The code that the reader came with stands for another report than this file. */
	otherReport: boolean;
}

/** Thirty files in ten minutes from one address. */
const paceOfFiles = { max: 30, seconds: 600 };
/** A code has 6.5e11 values; at this pace none is found by trying. */
const paceOfCodes = { max: 60, seconds: 600 };

/** Reads an upload within the size that a report may have. @throws InvalidInputError at the field `file`. */
async function readUpload(file: unknown): Promise<Buffer> {
	const refuse = (message: string): never => {
		throw new InvalidInputError(message, { file: message });
	};
	if (!(file instanceof File) || (file.size === 0 && file.name === ''))
		return refuse('Choose the PDF to check.');
	if (file.size > maxFileBytes) return refuse('The file is larger than 25 MB; no report of this service is.');
	return Buffer.from(await file.arrayBuffer());
}

/**
 * Verifies an uploaded file against this service's root and its ledger. The file is not kept.
 *
 * Records are recomputed only where a signature of this service vouches for them, so that nobody can make the
 * service compute what it has not computed before.
 *
 * @param file the form's field `file`.
 * @param address of the sender, for the pace.
 * @param code where the reader came with one.
 * @throws InvalidInputError, NotFoundError (code), TooManyRequestsError
 */
export async function checkFile(
	file: unknown,
	address: string,
	code?: string,
	db: Database = database()
): Promise<FileCheck> {
	await limit(`verify-file:${sourceOf(address)}`, paceOfFiles.max, paceOfFiles.seconds, db);
	const bytes = await readUpload(file);
	const expected = code === undefined ? undefined : await findByCode(code, db);
	const { result, identity } = await examineReport(bytes, {
		rootPem: await rootPem(db),
		onlyTrusted: true,
		maxTrials
	});
	const sha256 = createHash('sha256').update(bytes).digest('hex');
	const known = (await findKnownFile(sha256, db)) ?? null;
	const found = known?.code ?? identity?.code;
	return {
		result,
		identity,
		known,
		otherReport: expected !== undefined && found !== undefined && found !== expected.code
	};
}

/**
 * What a code stands for.
 * @throws NotFoundError, TooManyRequestsError
 */
export async function lookUpCode(
	code: string,
	address: string,
	db: Database = database()
): Promise<KnownReport> {
	await limit(`verify-code:${sourceOf(address)}`, paceOfCodes.max, paceOfCodes.seconds, db);
	return findByCode(code, db);
}
