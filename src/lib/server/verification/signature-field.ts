import { createHash } from 'node:crypto';
import { Lexer } from './pdf/lexer';
import { PdfError, PdfName, PdfString, type PdfDictionary, type PdfValue } from './pdf/values';

const key = '/ByteRange';
/** A signature dictionary is written in one piece of some 17 kB; the key stands in its first few lines. */
const maxLookBack = 4096;
const maxSignatures = 32;
const maxCms = 256 * 1024;

/** The first signature in a file, with what is wrong about its frame. */
export interface SignatureField {
	/** Offset of "N G obj". */
	objectOffset: number;
	subFilter: string;
	/** The CMS, padding removed. */
	cms: Buffer;
	/** SHA-256 over the two ranges; undefined where they do not fit the file. */
	digest: Buffer | undefined;
	/** Offset behind the last signed byte. */
	signedEnd: number;
	/** Claimed time, from M. */
	claimedAt: Date | undefined;
	faults: string[];
	/** Further signatures behind the signed part. */
	laterSignatures: number;
}

function occurrences(bytes: Buffer): number[] {
	const found: number[] = [];
	for (let at = bytes.indexOf(key); at >= 0; at = bytes.indexOf(key, at + 1)) {
		found.push(at);
		if (found.length > maxSignatures) throw new PdfError('The file holds too many signatures.');
	}
	return found;
}

/** Start of the indirect object around an offset: "12 0 obj". */
function objectAround(bytes: Buffer, at: number): number {
	const from = Math.max(0, at - maxLookBack);
	const before = bytes.toString('latin1', from, at);
	let start = -1;
	for (const match of before.matchAll(/(?<![0-9])\d{1,10} \d{1,5} obj\b/g)) start = from + match.index;
	if (start < 0) throw new PdfError('The signature stands in no object.');
	return start;
}

/** `D:YYYYMMDDHHmmSSZ`, the one form in which reports state the time. */
export function readPdfDate(value: PdfValue | undefined): Date | undefined {
	if (!(value instanceof PdfString)) return undefined;
	const parts = /^D:(\d{4})(\d\d)(\d\d)(\d\d)(\d\d)(\d\d)Z$/.exec(value.text)?.slice(1).map(Number);
	if (parts === undefined) return undefined;
	const [y, m, d, h, min, s] = parts as [number, number, number, number, number, number];
	const date = new Date(Date.UTC(y, m - 1, d, h, min, s));
	const same = date.getUTCMonth() === m - 1 && date.getUTCDate() === d && date.getUTCHours() === h;
	return same && min < 60 && s < 60 ? date : undefined;
}

/** Length of the DER object at the start, header included; undefined where the header is malformed. */
function derLength(bytes: Buffer): number | undefined {
	const first = bytes[1];
	if (bytes[0] !== 0x30 || first === undefined) return undefined;
	if (first < 0x80) return 2 + first;
	const count = first & 0x7f;
	if (count === 0 || count > 3 || bytes.length < 2 + count) return undefined;
	const length = 2 + count + bytes.readUIntBE(2, count);
	return length <= bytes.length ? length : undefined;
}

/** The CMS in Contents: lower-case hexadecimal without spaces, one DER object, and zeros to the end. */
function readContents(bytes: Buffer, contents: PdfString, faults: string[]): Buffer {
	if (contents.bytes.length > maxCms) throw new PdfError('The signature is too large.');
	const token = bytes.toString('latin1', contents.start, contents.end);
	if (!contents.hexadecimal || !/^<([0-9a-f]{2})+>$/.test(token)) {
		faults.push('The signature is not written the way this service writes it.');
	}
	const length = derLength(contents.bytes);
	if (length === undefined) {
		faults.push('The place of the signature holds no signature.');
		return Buffer.alloc(0);
	}
	if (contents.bytes.subarray(length).some((byte) => byte !== 0)) {
		faults.push('Something was hidden in the unused room behind the signature.');
	}
	return contents.bytes.subarray(0, length);
}

interface Range {
	gapStart: number;
	gapEnd: number;
	end: number;
}

/** The four numbers of ByteRange against the place of Contents, on raw bytes. */
function readRange(dictionary: PdfDictionary, contents: PdfString, faults: string[]): Range | undefined {
	const range = dictionary.get('ByteRange');
	const whole = (n: PdfValue): n is number => typeof n === 'number' && Number.isSafeInteger(n) && n >= 0;
	if (!Array.isArray(range) || range.length !== 4 || !range.every(whole)) {
		faults.push('The signature does not say which part of the file it covers.');
		return undefined;
	}
	const [start, length, second, rest] = range as [number, number, number, number];
	if (start !== 0) faults.push('The signature does not cover the beginning of the file.');
	if (length !== contents.start || second !== contents.end) {
		faults.push('The part that the signature leaves out is not exactly the signature itself.');
	}
	if (second < length) return undefined;
	return { gapStart: length, gapEnd: second, end: second + rest };
}

/**
 * Finds the first signature of a file on its raw bytes and checks its frame: where it stands, what it covers, what
 * it leaves out (K-01, K-03, K-11).
 * @returns undefined where the file holds no signature.
 * @throws PdfError where the signature's object cannot be read at all.
 */
export function readSignatureField(bytes: Buffer): SignatureField | undefined {
	const places = occurrences(bytes);
	const [first] = places;
	if (first === undefined) return undefined;
	const objectOffset = objectAround(bytes, first);
	const lexer = new Lexer(bytes, objectOffset);
	lexer.wholeNumber();
	lexer.wholeNumber();
	lexer.expectWord('obj');
	const dictionary = lexer.value();
	lexer.expectWord('endobj');
	if (!(dictionary instanceof Map)) throw new PdfError('The signature is no dictionary.');

	const faults: string[] = [];
	const contents = dictionary.get('Contents');
	if (!(contents instanceof PdfString)) throw new PdfError('The signature is empty.');
	const subFilter = dictionary.get('SubFilter');
	const cms = readContents(bytes, contents, faults);
	const range = readRange(dictionary, contents, faults);
	if (dictionary.has('Cert'))
		faults.push('The signature names its certificate in a place reports do not use.');
	const signedEnd = range?.end ?? bytes.length;
	if (signedEnd > bytes.length) faults.push('The file is shorter than what was signed: its end is missing.');
	if (places.filter((at) => at < signedEnd).length > 1) {
		faults.push('The signed part holds more than one signature.');
	}
	const fits = range !== undefined && range.end <= bytes.length;
	return {
		objectOffset,
		subFilter: subFilter instanceof PdfName ? subFilter.name : '',
		cms,
		digest: fits
			? createHash('sha256')
					.update(bytes.subarray(0, range.gapStart))
					.update(bytes.subarray(range.gapEnd, range.end))
					.digest()
			: undefined,
		signedEnd: Math.min(signedEnd, bytes.length),
		claimedAt: readPdfDate(dictionary.get('M')),
		faults,
		laterSignatures: places.filter((at) => at >= signedEnd).length
	};
}
