import { readAttachment } from './pdf/attachment';
import { PdfStructure, readTrailer } from './pdf/structure';
import { PdfError, PdfName, PdfReference, type PdfDictionary } from './pdf/values';

export const recordName = 'record.json';

/** What was signed, read as the one revision that it must be. */
export interface SignedRevision {
	/** Content of record.json. */
	record: Buffer | undefined;
	faults: string[];
}

/** Things that act or hide, none of which a report holds (K-04, K-06). */
function activeParts(pdf: PdfStructure, catalog: PdfDictionary): boolean {
	const names = pdf.resolve(catalog.get('Names'));
	return (
		['OpenAction', 'AA', 'OCProperties', 'Collection'].some((key) => catalog.has(key)) ||
		(names instanceof Map && names.has('JavaScript'))
	);
}

/** Whether the form's one field is the signature that stands at the given place. */
function isOnlySignature(pdf: PdfStructure, catalog: PdfDictionary, objectOffset: number): boolean {
	const form = pdf.resolve(catalog.get('AcroForm'));
	const fields = form instanceof Map ? pdf.resolve(form.get('Fields')) : null;
	if (!Array.isArray(fields) || fields.length !== 1) return false;
	const field = pdf.dictionary(fields[0], 'signature field');
	const type = pdf.resolve(field.get('FT'));
	const value = field.get('V');
	return (
		type instanceof PdfName &&
		type.name === 'Sig' &&
		!field.has('Kids') &&
		value instanceof PdfReference &&
		pdf.offsetOf(value) === objectOffset
	);
}

/**
 * Reads the signed part as a file of its own: one revision, one form field that is this signature, no scripts, no
 * layers, and the attached record.
 */
export function readSignedRevision(signed: Buffer, signatureOffset: number): SignedRevision {
	const faults: string[] = [];
	let record: Buffer | undefined;
	try {
		const pdf = PdfStructure.read(signed);
		const catalog = pdf.catalog;
		if (pdf.trailer.has('Prev') || signed.indexOf('startxref') !== signed.lastIndexOf('startxref')) {
			faults.push('The file had been added to before it was signed.');
		}
		if (!/%%EOF[\r\n]*$/.test(signed.toString('latin1', Math.max(0, signed.length - 16)))) {
			faults.push('The signed part does not end where a file ends.');
		}
		if (!isOnlySignature(pdf, catalog, signatureOffset)) {
			faults.push('The file’s form does not point at this one signature.');
		}
		if (activeParts(pdf, catalog)) faults.push('The file holds scripts or layers, which reports do not.');
		record = readAttachment(pdf, recordName);
	} catch (error) {
		if (!(error instanceof PdfError)) throw error;
		faults.push(error.message);
	}
	return { record, faults };
}

/** Whether the file is encrypted, be it with an empty password; judged on the last trailer. */
export function isEncrypted(bytes: Buffer): boolean {
	try {
		return readTrailer(bytes).has('Encrypt');
	} catch (error) {
		if (!(error instanceof PdfError)) throw error;
		return false;
	}
}

/**
 * What stands behind the signed part. A document security store (B-LT) alone would be `revocation-data`; reports
 * carry none so far, so that every addition counts as one.
 */
export function classifyAddition(bytes: Buffer, signedEnd: number): 'nothing' | 'addition' {
	return signedEnd >= bytes.length ? 'nothing' : 'addition';
}
