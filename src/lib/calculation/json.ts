import { ProblemError } from './problem';

/** A step further into a JSON Pointer (RFC 6901). */
export function pointer(path: string, key: string | number): string {
	return `${path}/${String(key).replaceAll('~', '~0').replaceAll('/', '~1')}`;
}

export type PlainObject = Readonly<Record<string, unknown>>;

export function isPlainObject(value: unknown): value is PlainObject {
	return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** A name as it is quoted in a message: cut, so that nobody's megabyte comes back. */
export function quoted(name: unknown): string {
	const words = typeof name === 'string' || typeof name === 'number';
	const text = words ? String(name) : (JSON.stringify(name) ?? String(name));
	return `"${text.length > 60 ? `${text.slice(0, 60)}…` : text}"`;
}

/** The value as an object that holds no keys but the allowed ones. */
export function objectAt(value: unknown, path: string, allowed: readonly string[]): PlainObject {
	if (!isPlainObject(value)) {
		throw new ProblemError('wrong-type', `Here an object with ${list(allowed)} is expected.`, path);
	}
	for (const key of Object.keys(value)) {
		if (!allowed.includes(key)) {
			throw new ProblemError(
				'unknown-key',
				`${quoted(key)} is not known here. ${allowed.length === 0 ? 'Nothing is expected' : `Expected: ${list(allowed)}`}.`,
				pointer(path, key)
			);
		}
	}
	return value;
}

function list(words: readonly string[]): string {
	return words.join(', ');
}

/** Own property or undefined: a key such as "constructor" finds nothing. */
export function own(object: PlainObject, key: string): unknown {
	return Object.hasOwn(object, key) ? object[key] : undefined;
}

export function numberAt(value: unknown, path: string): number {
	if (typeof value === 'number' && Number.isFinite(value)) return value;
	if (value === undefined) throw new ProblemError('missing', 'A number is missing here.', path);
	const finite =
		typeof value === 'number' || (typeof value === 'string' && /^[+-]?(nan|inf(inity)?)$/i.test(value));
	throw finite || value === null
		? new ProblemError('not-finite', `A finite number is expected, not ${quoted(value)}.`, path)
		: new ProblemError('wrong-type', `A number is expected, not ${quoted(value)}.`, path);
}

export function textAt(value: unknown, path: string, longest: number): string {
	if (typeof value !== 'string') throw new ProblemError('wrong-type', 'A text is expected here.', path);
	if (value.length > longest) {
		throw new ProblemError('too-long', `The text may have at most ${longest} characters.`, path);
	}
	// A lone surrogate has no UTF-8 form, hence no hash that others could compute.
	if (/[\ud800-\udfff]/u.test(value)) {
		throw new ProblemError('malformed-text', 'The text holds half of a character pair.', path);
	}
	return value;
}

export function choiceAt<T extends string>(value: unknown, path: string, choices: readonly T[]): T {
	const found = choices.find((choice) => choice === value);
	if (found !== undefined) return found;
	throw new ProblemError('unknown-choice', `${quoted(value)} is not one of ${list(choices)}.`, path);
}
