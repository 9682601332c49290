import canonicalize from 'canonicalize';

const deepest = 64;

/** Refuses what RFC 8785 has no form for, and what the serialiser would quietly change. */
function checkPlain(value: unknown, path: string, depth: number): void {
	if (value === null || typeof value === 'boolean') return;
	if (typeof value === 'number') {
		if (!Number.isFinite(value)) throw new TypeError(`${path}: not a finite number`);
		return;
	}
	if (typeof value === 'string') {
		if (/[\ud800-\udfff]/u.test(value)) throw new TypeError(`${path}: not well-formed text`);
		return;
	}
	if (typeof value !== 'object') throw new TypeError(`${path}: ${typeof value} is not JSON`);
	if (depth > deepest) throw new TypeError(`${path}: nested too deeply`);
	if (Array.isArray(value)) {
		value.forEach((entry, i) => checkPlain(entry, `${path}/${i}`, depth + 1));
		return;
	}
	const prototype: unknown = Object.getPrototypeOf(value);
	if (prototype !== Object.prototype && prototype !== null) throw new TypeError(`${path}: not plain data`);
	for (const [key, entry] of Object.entries(value)) {
		if (/[\ud800-\udfff]/u.test(key)) throw new TypeError(`${path}: a key is not well-formed text`);
		if (entry === undefined) continue;
		if (typeof entry === 'function') throw new TypeError(`${path}/${key}: function is not JSON`);
		checkPlain(entry, `${path}/${key}`, depth + 1);
	}
}

/**
 * The canonical JSON of plain data (RFC 8785). Keys whose value is undefined are left out, as JSON does.
 * @throws TypeError for anything that JSON cannot carry
 */
export function canonicalJson(value: unknown): string {
	checkPlain(value, '', 0);
	const text = canonicalize(value);
	if (text === undefined) throw new TypeError('Nothing to serialise.');
	return text;
}
