import { eq } from 'drizzle-orm';
import type { ReportModel } from '$lib/report/model';
import { NotFoundError } from '../access/errors';
import { database, type Database } from '../db';
import { issues } from '../db/schema';
import { readAttachment } from '../verification/pdf/attachment';
import { PdfStructure } from '../verification/pdf/structure';
import { PdfError } from '../verification/pdf/values';
import { recordName } from '../verification/revision';
import { countOpening, findShared, type SharedIssue } from './find';
import { readingOf, type Reading } from './reading';
import { verdictOf, type SharedVerdict } from './verdict';

export interface SharedReport {
	reading: Reading;
	verdict: SharedVerdict;
	/** What can be downloaded; without a record where the stored file is damaged, which the verdict then says. */
	files: { pdf: SharedFile; record: SharedFile | null };
}

export interface SharedFile {
	name: string;
	size: number;
}

/** Issues are frozen, so what was put into words once may be shown again. */
const readings = new Map<string, Promise<Reading>>();
const mostReadings = 50;

function readingOfIssue(issueId: string, model: ReportModel): Promise<Reading> {
	const before = readings.get(issueId);
	if (before !== undefined) return before;
	const reading = readingOf(model);
	readings.set(issueId, reading);
	reading.catch(() => readings.delete(issueId));
	const oldest = readings.size > mostReadings ? readings.keys().next().value : undefined;
	if (oldest !== undefined) readings.delete(oldest);
	return reading;
}

async function signedFile({ issueId }: SharedIssue, db: Database): Promise<Buffer> {
	const [row] = await db.select({ pdf: issues.pdf }).from(issues).where(eq(issues.id, issueId));
	if (!row?.pdf) throw new NotFoundError('page');
	return row.pdf;
}

/** The attached record, byte for byte as it stands in the signed file; undefined where the file is damaged. */
function attachedRecord(pdf: Buffer): Buffer | undefined {
	try {
		return readAttachment(PdfStructure.read(pdf), recordName);
	} catch (error) {
		if (error instanceof PdfError) return undefined;
		throw error;
	}
}

const fileNames = ({ number, revision }: SharedIssue) => ({
	pdf: `${number}-r${revision}.pdf`,
	record: `${number}-r${revision}-record.json`
});

/**
 * The report behind a link, for a reader without an account, with what the verifier says of its file.
 * @param asked `address` of the reader, for the pace; `counted` false where nobody reads, as for a HEAD request
 * @throws NotFoundError, GoneError, TooManyRequestsError: see `findShared`
 */
export async function openShared(
	token: string,
	asked: { address: string; counted: boolean },
	db: Database = database()
): Promise<SharedReport> {
	const shared = await findShared(token, asked.address, db);
	const [row] = await db
		.select({ model: issues.model, pdf: issues.pdf })
		.from(issues)
		.where(eq(issues.id, shared.issueId));
	if (!row?.pdf) throw new NotFoundError('page');
	const names = fileNames(shared);
	const [reading, verdict] = await Promise.all([
		readingOfIssue(shared.issueId, row.model as ReportModel),
		verdictOf(row.pdf, db)
	]);
	const record = attachedRecord(row.pdf);
	if (asked.counted) await countOpening(shared.linkId, db);
	return {
		reading,
		verdict,
		files: {
			pdf: { name: names.pdf, size: row.pdf.length },
			record: record === undefined ? null : { name: names.record, size: record.length }
		}
	};
}

/** The signed file behind a link. Not counted as a reading. @throws as `openShared` */
export async function sharedPdf(
	token: string,
	address: string,
	db: Database = database()
): Promise<{ name: string; pdf: Buffer }> {
	const shared = await findShared(token, address, db);
	return { name: fileNames(shared).pdf, pdf: await signedFile(shared, db) };
}

/** The record that is attached to the signed file behind a link, exactly as attached. @throws as `openShared` */
export async function sharedRecord(
	token: string,
	address: string,
	db: Database = database()
): Promise<{ name: string; record: Buffer }> {
	const shared = await findShared(token, address, db);
	const record = attachedRecord(await signedFile(shared, db));
	if (record === undefined) throw new NotFoundError('file');
	return { name: fileNames(shared).record, record };
}
