import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { newCode } from '../reports/code';
import { normaliseCode } from './code';

describe('codes', () => {
	it('are read as they are drawn', () => {
		for (let i = 0; i < 200; i++) {
			const code = newCode();
			expect(normaliseCode(code)).toBe(code);
		}
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
