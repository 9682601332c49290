/** PDF objects (ISO 32000-1, 7.3) as far as reading a report's structure needs them. */

export class PdfName {
	constructor(readonly name: string) {}
}

export class PdfReference {
	constructor(
		readonly number: number,
		readonly generation: number
	) {}
}

/** A string with the offsets of its token in the file, delimiters included. */
export class PdfString {
	constructor(
		readonly bytes: Buffer,
		readonly hexadecimal: boolean,
		readonly start: number,
		readonly end: number
	) {}

	/** The text: UTF-16 where it starts with a byte order mark, else byte by byte. */
	get text(): string {
		if (this.bytes[0] !== 0xfe || this.bytes[1] !== 0xff) return this.bytes.toString('latin1');
		const even = this.bytes.subarray(2, this.bytes.length - (this.bytes.length % 2));
		return Buffer.from(even).swap16().toString('utf16le');
	}
}

export type PdfDictionary = Map<string, PdfValue>;
export type PdfValue =
	null | boolean | number | PdfName | PdfReference | PdfString | PdfValue[] | PdfDictionary;

/** The file breaks the grammar, or uses what reports never use; the message says where or what. */
export class PdfError extends Error {
	constructor(message: string) {
		super(message);
		this.name = 'PdfError';
	}
}
