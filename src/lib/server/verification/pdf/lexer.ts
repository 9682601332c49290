import { PdfError, PdfName, PdfReference, PdfString, type PdfDictionary, type PdfValue } from './values';

const whitespace = new Set([0, 9, 10, 12, 13, 32]);
const delimiters = new Set(Array.from('()<>[]{}/%', (c) => c.charCodeAt(0)));
const maxDepth = 32;
/** Bounds on one object: a signature's field has 16 kB, a catalogue of a long report some thousand values. */
const maxStringBytes = 1024 * 1024;
const maxValues = 300_000;

const hexDigit = (code: number): number => {
	if (code >= 48 && code <= 57) return code - 48;
	const lower = code | 32;
	return lower >= 97 && lower <= 102 ? lower - 87 : -1;
};

/**
 * Reads objects from raw bytes. Strict where readers differ and forgers gain from it: a dictionary with a key
 * twice, an unended string and an unknown word are errors, and nesting is bounded.
 */
export class Lexer {
	private values = 0;

	constructor(
		readonly bytes: Buffer,
		public position = 0
	) {}

	private fail(what: string): never {
		throw new PdfError(`${what} at byte ${String(this.position)}.`);
	}

	/** Skips white space and comments. */
	skip(): void {
		for (;;) {
			const code = this.bytes[this.position];
			if (code === undefined) return;
			if (code === 0x25) {
				while (this.position < this.bytes.length && !this.atLineEnd()) this.position++;
			} else if (whitespace.has(code)) this.position++;
			else return;
		}
	}

	private atLineEnd(): boolean {
		const code = this.bytes[this.position];
		return code === 10 || code === 13;
	}

	/** The next run of regular characters; empty at a delimiter or at the end. */
	word(): string {
		this.skip();
		const start = this.position;
		for (;;) {
			const code = this.bytes[this.position];
			if (code === undefined || whitespace.has(code) || delimiters.has(code)) break;
			this.position++;
		}
		return this.bytes.toString('latin1', start, this.position);
	}

	/** Takes the word if it comes next. */
	takeWord(expected: string): boolean {
		const back = this.position;
		if (this.word() === expected) return true;
		this.position = back;
		return false;
	}

	expectWord(expected: string): void {
		if (!this.takeWord(expected)) this.fail(`"${expected}" is missing`);
	}

	/** A whole number, not negative. */
	wholeNumber(): number {
		const word = this.word();
		if (!/^\d{1,15}$/.test(word)) this.fail('A whole number is missing');
		return Number(word);
	}

	value(depth = 0): PdfValue {
		if (depth > maxDepth) this.fail('Objects are nested too deeply');
		if (++this.values > maxValues) this.fail('An object holds too many values');
		this.skip();
		const code = this.bytes[this.position];
		if (code === 0x2f) return this.name();
		if (code === 0x28) return this.literalString();
		if (code === 0x5b) return this.array(depth);
		if (code === 0x3c) {
			return this.bytes[this.position + 1] === 0x3c ? this.dictionary(depth) : this.hexString();
		}
		return this.numberOrWord();
	}

	private name(): PdfName {
		this.position++;
		const start = this.position;
		const raw = this.bytes[start] === undefined || whitespace.has(this.bytes[start]) ? '' : this.word();
		const name = raw.replace(/#([0-9A-Fa-f]{2})/g, (_, hex: string) =>
			String.fromCharCode(parseInt(hex, 16))
		);
		return new PdfName(name);
	}

	private array(depth: number): PdfValue[] {
		this.position++;
		const members: PdfValue[] = [];
		for (;;) {
			this.skip();
			if (this.bytes[this.position] === 0x5d) break;
			members.push(this.value(depth + 1));
		}
		this.position++;
		return members;
	}

	private dictionary(depth: number): PdfDictionary {
		this.position += 2;
		const entries: PdfDictionary = new Map();
		for (;;) {
			this.skip();
			if (this.bytes[this.position] === 0x3e && this.bytes[this.position + 1] === 0x3e) break;
			const key = this.value(depth + 1);
			if (!(key instanceof PdfName)) this.fail('A dictionary key is no name');
			if (entries.has(key.name)) this.fail(`The key "${key.name}" stands twice in one dictionary`);
			entries.set(key.name, this.value(depth + 1));
		}
		this.position += 2;
		return entries;
	}

	private hexString(): PdfString {
		const start = this.position++;
		const end = this.bytes.indexOf(0x3e, this.position);
		if (end < 0) this.fail('A string does not end');
		if (end - start > maxStringBytes) this.fail('A string is too long');
		const digits: number[] = [];
		for (; this.position < end; this.position++) {
			const code = this.bytes[this.position] as number;
			if (whitespace.has(code)) continue;
			const digit = hexDigit(code);
			if (digit < 0) this.fail('A string holds what is no hexadecimal digit');
			digits.push(digit);
		}
		this.position = end + 1;
		if (digits.length % 2 === 1) digits.push(0);
		const bytes = Buffer.alloc(digits.length / 2);
		for (let i = 0; i < bytes.length; i++) {
			bytes[i] = ((digits[2 * i] as number) << 4) | (digits[2 * i + 1] as number);
		}
		return new PdfString(bytes, true, start, this.position);
	}

	private literalString(): PdfString {
		const start = this.position++;
		const out: number[] = [];
		for (let open = 1; ; this.position++) {
			const code = this.bytes[this.position];
			if (code === undefined) this.fail('A string does not end');
			if (code === 0x5c) {
				const escaped = this.escape();
				if (escaped !== undefined) out.push(escaped);
				continue;
			}
			if (out.length > maxStringBytes) this.fail('A string is too long');
			if (code === 0x28) open++;
			if (code === 0x29 && --open === 0) break;
			out.push(code);
		}
		this.position++;
		return new PdfString(Buffer.from(out), false, start, this.position);
	}

	/** At a backslash; leaves the position on the last character of the escape. */
	private escape(): number | undefined {
		this.position++;
		const octal = /^[0-7]{1,3}/.exec(this.bytes.toString('latin1', this.position, this.position + 3))?.[0];
		if (octal !== undefined) {
			this.position += octal.length - 1;
			return parseInt(octal, 8) & 255;
		}
		const code = this.bytes[this.position];
		if (code === 13 && this.bytes[this.position + 1] === 10) this.position++;
		if (code === undefined || code === 10 || code === 13) return undefined;
		const at = 'nrtbf'.indexOf(String.fromCharCode(code));
		return at < 0 ? code : [10, 13, 9, 8, 12][at];
	}

	private numberOrWord(): PdfValue {
		const word = this.word();
		if (word === 'true') return true;
		if (word === 'false') return false;
		if (word === 'null') return null;
		if (!/^[+-]?(\d+\.?\d*|\.\d+)$/.test(word)) this.fail(`"${word.slice(0, 20)}" is no object`);
		if (/^\d{1,10}$/.test(word)) {
			const back = this.position;
			const generation = this.word();
			if (/^\d{1,5}$/.test(generation) && this.takeWord('R')) {
				return new PdfReference(Number(word), Number(generation));
			}
			this.position = back;
		}
		return Number(word);
	}
}
