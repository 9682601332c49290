import { namedUnits, prefixes, type Dimension, type NamedUnit } from './unit-table';

/** One factor of a compound unit, as printed. */
export interface UnitFactor {
	text: string;
	tex: string;
	exponent: number;
}

export interface Unit {
	dimension: Dimension;
	/** SI value = (value + shift) * num / den. */
	num: number;
	den: number;
	shift: number;
	factors: readonly UnitFactor[];
}

const longest = 80;
const token = /\s*(?:([A-Za-zµ%]+\d?(?![\d.]))|([-+]?\d+(?:\.\d+)?)|([*/^()·]))/y;

interface NamedFactor {
	unit: NamedUnit;
	text: string;
	tex: string;
}

function find(name: string): NamedFactor | undefined {
	const own = namedUnits[name];
	if (own !== undefined) {
		const text = own.text ?? name;
		return { unit: own, text, tex: own.tex ?? `\\mathrm{${text}}` };
	}
	for (const length of [2, 1]) {
		const prefix = prefixes[name.slice(0, length)];
		const base = namedUnits[name.slice(length)];
		if (prefix === undefined || base?.prefixed !== true) continue;
		const text = prefix[2] + (base.text ?? name.slice(length));
		return {
			unit: { dimension: base.dimension, num: base.num * prefix[0], den: base.den * prefix[1] },
			text,
			tex: `\\mathrm{${text.replace('µ', '\\mu ')}}`
		};
	}
	return undefined;
}

/** `value` to a whole or half power by products and a square root; undefined for any other exponent. */
function power(value: number, exponent: number): number | undefined {
	const size = Math.abs(exponent);
	if (size > 12 || size * 2 !== Math.floor(size * 2)) return undefined;
	let result = size === Math.floor(size) ? 1 : Math.sqrt(value);
	for (let i = 1; i <= size; i++) result *= value;
	return result;
}

class UnitReader {
	private at = 0;
	private kind = 0;
	private word = '';
	readonly factors: UnitFactor[] = [];
	readonly dimension: [number, number, number, number, number, number] = [0, 0, 0, 0, 0, 0];
	num = 1;
	den = 1;
	shift = 0;
	failed = false;

	constructor(private readonly source: string) {
		this.advance();
	}

	private advance(): void {
		token.lastIndex = this.at;
		const found = token.exec(this.source);
		if (found === null) {
			this.failed ||= this.source.slice(this.at).trim() !== '';
			this.kind = 0;
			this.word = '';
			return;
		}
		this.at = token.lastIndex;
		this.kind = found[1] !== undefined ? 1 : found[2] !== undefined ? 2 : 3;
		this.word = found[1] ?? found[2] ?? found[3] ?? '';
	}

	get done(): boolean {
		return this.kind === 0;
	}

	private is(text: string): boolean {
		return this.kind !== 0 && this.word === text;
	}

	private isName(): boolean {
		return this.kind === 1;
	}

	private isNumber(): boolean {
		return this.kind === 2;
	}

	private isSymbol(): boolean {
		return this.kind === 3;
	}

	/** Factors left to right; a space multiplies, as `*` does, and only the factor after `/` is divided by. */
	read(sign: number, depth: number): void {
		let divide = false;
		for (let first = true; !this.failed; first = false) {
			if (this.done || this.is(')')) {
				this.failed ||= first || divide;
				return;
			}
			if (this.isSymbol() && !this.is('(')) {
				if (first || divide || (!this.is('*') && !this.is('/') && !this.is('·'))) {
					this.failed = true;
					return;
				}
				divide = this.is('/');
				this.advance();
				if (!(this.isName() || this.is('('))) {
					this.failed = true;
					return;
				}
			}
			this.readFactor(divide ? -sign : sign, depth);
			divide = false;
		}
	}

	private readFactor(sign: number, depth: number): void {
		if (this.is('(') && depth < 4) {
			this.advance();
			this.read(sign, depth + 1);
			if (!this.is(')')) this.failed = true;
			this.advance();
			return;
		}
		if (this.isNumber() && this.is('1') && this.factors.length === 0) {
			this.advance();
			return;
		}
		const named = this.isName() ? find(this.word) : undefined;
		if (named === undefined) {
			this.failed = true;
			return;
		}
		this.advance();
		let exponent = sign;
		if (this.is('^')) {
			this.advance();
			const bracket = this.is('(');
			if (bracket) this.advance();
			if (!this.isNumber()) {
				this.failed = true;
				return;
			}
			exponent *= Number(this.word);
			this.advance();
			if (bracket) {
				if (!this.is(')')) this.failed = true;
				this.advance();
			}
		}
		this.multiply(named, exponent);
	}

	private multiply({ unit, text, tex }: NamedFactor, exponent: number): void {
		const num = power(unit.num, exponent);
		const den = power(unit.den, exponent);
		if (num === undefined || den === undefined) {
			this.failed = true;
			return;
		}
		this.num *= exponent > 0 ? num : den;
		this.den *= exponent > 0 ? den : num;
		unit.dimension.forEach((e, i) => {
			this.dimension[i] = (this.dimension[i] ?? 0) + e * exponent;
		});
		this.shift = this.factors.length === 0 && exponent === 1 ? (unit.shift ?? 0) : 0;
		this.factors.push({ text, tex, exponent });
	}
}

/** Texts are the users'; the memory of them must not grow without end. */
const mostKnown = 2000;
const known = new Map<string, Unit>();

/** Makes a unit that came from elsewhere (the mathjs table) known under its text. */
export function rememberUnit(text: string, unit: Unit): void {
	if (known.size >= mostKnown) {
		for (const oldest of known.keys()) {
			known.delete(oldest);
			break;
		}
	}
	known.set(text, unit);
}

/**
 * Reads a unit such as `W/m^2`, `W/(m^2 K)`, `MJ/m^2/day`, `s^-0.5`, `degC`, `%` or the empty text of a pure
 * number. A scale with a zero point of its own (degC, degF) keeps it only when it stands alone.
 * @returns undefined if the own table does not know it; `loadUnits` may then find it elsewhere.
 */
export function parseUnit(text: string): Unit | undefined {
	const earlier = known.get(text);
	if (earlier !== undefined) return earlier;
	if (text.length > longest) return undefined;
	let unit: Unit;
	if (text.trim() === '') {
		unit = { dimension: [0, 0, 0, 0, 0, 0], num: 1, den: 1, shift: 0, factors: [] };
	} else {
		const reader = new UnitReader(text);
		reader.read(1, 0);
		if (reader.failed || !reader.done || reader.factors.length === 0) return undefined;
		const { num, den, shift, factors, dimension } = reader;
		unit = { dimension, num, den, shift, factors };
	}
	rememberUnit(text, unit);
	return unit;
}

export function sameDimension(a: Dimension, b: Dimension): boolean {
	return a.every((exponent, i) => exponent === b[i]);
}
