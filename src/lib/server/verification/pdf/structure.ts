import { inflateSync } from 'node:zlib';
import { Lexer } from './lexer';
import { PdfError, PdfName, PdfReference, type PdfDictionary, type PdfValue } from './values';

const maxObjects = 200_000;
/** A report's attached record has some 10 kB; nothing honest comes near this. */
const maxInflated = 16 * 1024 * 1024;

interface Indirect {
	value: PdfValue;
	/** Offset behind the value, where a stream's data may follow. */
	end: number;
}

const unsupported =
	'The file uses cross-reference streams, which reports of this service do not use: another program saved it anew.';

/** A reader at the last cross-reference section, classic or not. */
function atCrossReference(bytes: Buffer): Lexer {
	const tail = bytes.lastIndexOf('startxref');
	if (tail < 0) throw new PdfError('The file has no cross-reference table; it may be cut off.');
	const lexer = new Lexer(bytes, tail + 'startxref'.length);
	const table = lexer.wholeNumber();
	if (table >= tail) throw new PdfError('The cross-reference table lies outside the file.');
	lexer.position = table;
	return lexer;
}

/**
 * The last trailer of any file: behind a classic table, or the dictionary of a cross-reference stream.
 * @throws PdfError where there is none.
 */
export function readTrailer(bytes: Buffer): PdfDictionary {
	const lexer = atCrossReference(bytes);
	if (lexer.takeWord('xref')) return PdfStructure.read(bytes).trailer;
	lexer.wholeNumber();
	lexer.wholeNumber();
	lexer.expectWord('obj');
	const dictionary = lexer.value();
	if (!(dictionary instanceof Map)) throw new PdfError('The trailer is no dictionary.');
	return dictionary;
}

/** A file with one classic cross-reference table, as the report writer makes it. */
export class PdfStructure {
	private constructor(
		private readonly bytes: Buffer,
		readonly trailer: PdfDictionary,
		private readonly offsets: ReadonlyMap<number, { offset: number; generation: number }>
	) {}

	/**
	 * Reads the last cross-reference table and its trailer; earlier revisions are not followed.
	 * @throws PdfError where there is none.
	 */
	static read(bytes: Buffer): PdfStructure {
		const lexer = atCrossReference(bytes);
		if (!lexer.takeWord('xref')) {
			const word = lexer.word();
			throw new PdfError(/^\d+$/.test(word) ? unsupported : 'The cross-reference table is missing.');
		}
		const offsets = new Map<number, { offset: number; generation: number }>();
		while (!lexer.takeWord('trailer')) {
			const first = lexer.wholeNumber();
			const count = lexer.wholeNumber();
			if (first + count > maxObjects) throw new PdfError('The file has too many objects.');
			for (let number = first; number < first + count; number++) {
				const offset = lexer.wholeNumber();
				const generation = lexer.wholeNumber();
				const kind = lexer.word();
				if (kind !== 'n' && kind !== 'f') throw new PdfError('The cross-reference table is malformed.');
				if (kind === 'f') continue;
				if (offsets.has(number)) throw new PdfError(`Object ${String(number)} is listed twice.`);
				offsets.set(number, { offset, generation });
			}
		}
		const trailer = lexer.value();
		if (!(trailer instanceof Map)) throw new PdfError('The trailer is no dictionary.');
		return new PdfStructure(bytes, trailer, offsets);
	}

	/** Where an object begins, by its reference. */
	offsetOf(reference: PdfReference): number {
		const entry = this.offsets.get(reference.number);
		if (entry?.generation !== reference.generation) {
			throw new PdfError(`Object ${String(reference.number)} is missing.`);
		}
		return entry.offset;
	}

	private load(reference: PdfReference): Indirect {
		const lexer = new Lexer(this.bytes, this.offsetOf(reference));
		const [number, generation] = [lexer.wholeNumber(), lexer.wholeNumber()];
		lexer.expectWord('obj');
		if (number !== reference.number || generation !== reference.generation) {
			throw new PdfError(`Another object stands in the place of object ${String(reference.number)}.`);
		}
		return { value: lexer.value(), end: lexer.position };
	}

	/** The value itself, behind at most one reference. */
	resolve(value: PdfValue | undefined): PdfValue {
		if (!(value instanceof PdfReference)) return value ?? null;
		const target = this.load(value).value;
		if (target instanceof PdfReference) throw new PdfError('A reference points at a reference.');
		return target;
	}

	/** @throws PdfError if it is something else. */
	dictionary(value: PdfValue | undefined, what: string): PdfDictionary {
		const found = this.resolve(value);
		if (!(found instanceof Map)) throw new PdfError(`The ${what} is missing.`);
		return found;
	}

	get catalog(): PdfDictionary {
		return this.dictionary(this.trailer.get('Root'), 'catalog');
	}

	/** The data of a stream, inflated within bounds. Filters other than none and FlateDecode are refused. */
	stream(reference: PdfValue | undefined): Buffer {
		if (!(reference instanceof PdfReference)) throw new PdfError('A stream is missing.');
		const { value, end } = this.load(reference);
		const lexer = new Lexer(this.bytes, end);
		lexer.expectWord('stream');
		if (!(value instanceof Map)) throw new PdfError('A stream has no dictionary.');
		if (this.bytes[lexer.position] === 13) lexer.position++;
		if (this.bytes[lexer.position] === 10) lexer.position++;
		const length = this.resolve(value.get('Length'));
		if (typeof length !== 'number' || !Number.isInteger(length) || length < 0) {
			throw new PdfError('A stream has no length.');
		}
		const data = this.bytes.subarray(lexer.position, lexer.position + length);
		lexer.position += length;
		lexer.expectWord('endstream');
		const filter = this.resolve(value.get('Filter'));
		if (filter === null) return data;
		if (!(filter instanceof PdfName) || filter.name !== 'FlateDecode' || value.has('DecodeParms')) {
			throw new PdfError('A stream is packed in a way that reports do not use.');
		}
		try {
			return inflateSync(data, { maxOutputLength: maxInflated });
		} catch {
			throw new PdfError('A stream cannot be unpacked, or unpacks to more than a report may hold.');
		}
	}
}
