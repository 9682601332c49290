import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { newReportCode, normaliseCode } from './code';

describe('codes', () => {
	it('are of one form, differ, and use no character that is taken for another', () => {
		const codes = Array.from({ length: 500 }, newReportCode);
		expect(new Set(codes).size).toBe(500);
		for (const code of codes) expect(code).toMatch(/^[2-9A-HJKMNP-TV-Z]{4}-[2-9A-HJKMNP-TV-Z]{4}$/);
	});

	it.each(['8KQ2-7MTR', '8kq27mtr', ' 8kq2 7mtr ', '8KQ2–7MTR'])('are read as typed: %s', (typed) => {
		expect(normaliseCode(typed)).toBe('8KQ2-7MTR');
	});

	it('are either of the form of the ledger or refused, whatever was typed', () => {
		fc.assert(
			fc.property(fc.string(), (typed) => {
				expect(normaliseCode(typed) ?? 'AAAA-AAAA').toMatch(/^[0-9A-Z]{4}-[0-9A-Z]{4}$/);
			})
		);
		expect(normaliseCode('8KQ2-7MT')).toBeUndefined();
		expect(normaliseCode("8KQ2-7MT'")).toBeUndefined();
	});
});
