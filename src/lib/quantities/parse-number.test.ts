import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseNumber, parseNumbers } from './parse-number';

const value = (text: string) => {
	const parsed = parseNumber(text);
	return parsed.ok ? parsed.value : parsed.reason;
};

describe('parseNumber', () => {
	it.each([
		['1361', 1361],
		['0.294', 0.294],
		['0,294', 0.294],
		['−24,2', -24.2],
		['1 361,5', 1361.5],
		['1\u202f361', 1361],
		['1.234,5', 1234.5],
		['1,234.5', 1234.5],
		['1,234,567', 1234567],
		['5.67e-8', 5.67e-8],
		['.5', 0.5],
		['12,34', 12.34]
	])('reads %s', (text, expected) => {
		expect(value(text)).toBe(expected);
	});

	it('refuses what could mean two numbers and names both', () => {
		expect(value('1,361')).toContain('1.361 or 1361');
	});

	it.each(['', 'abc', '1.2.3', '1,2,3', '--1', '1e999', 'NaN', 'Infinity', '0x10', '1 23', '12 34 5'])(
		'refuses %j with a reason',
		(text) => {
			expect(value(text)).toEqual(expect.any(String));
		}
	);

	it('reads back every finite number that JavaScript writes, with point and with comma', () => {
		fc.assert(
			fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (x) => {
				const text = String(x);
				expect(value(text)).toBe(x === 0 ? Number(text) : x);
				const comma = value(text.replace('.', ','));
				expect(comma === x || typeof comma === 'string').toBe(true);
			})
		);
	});
});

describe('parseNumbers', () => {
	it('takes semicolons and spaces, decimal commas included', () => {
		expect(parseNumbers('0,1; 0.2 3')).toEqual({ ok: true, values: [0.1, 0.2, 3] });
	});

	it('names the faulty part', () => {
		expect(parseNumbers('1; x')).toMatchObject({ ok: false, reason: expect.stringContaining('x') as string });
	});
});
