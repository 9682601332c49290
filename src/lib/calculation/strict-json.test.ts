import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseStrictJson } from './strict-json';

describe('strict JSON', () => {
	it('reads what JSON.parse reads', () => {
		fc.assert(
			fc.property(fc.json(), fc.constantFrom(0, 1, 2), (text, indent) => {
				const spaced = JSON.stringify(JSON.parse(text), null, indent);
				expect(parseStrictJson(spaced)).toEqual(JSON.parse(text));
			})
		);
	});

	it.each([
		['{"a":1,"a":2}', '/a'],
		['{"x":[{"a":1},{"a":{"b":[],"c":"}","b":0}}]}', '/x/1/a/b'],
		['{"a":1, "\\u0061" : 2}', '/a'],
		['[{"__proto__":1,"__proto__":2}]', '/0/__proto__']
	])('%s repeats a key at %s', (text, path) => {
		expect(() => parseStrictJson(text)).toThrow(expect.objectContaining({ code: 'repeated', path }));
	});

	it('says what is no JSON, and what is too deep', () => {
		expect(() => parseStrictJson('{"a":NaN}')).toThrow(expect.objectContaining({ code: 'not-json' }));
		expect(() => parseStrictJson('['.repeat(100) + ']'.repeat(100))).toThrow(
			expect.objectContaining({ code: 'too-deep' })
		);
	});
});
