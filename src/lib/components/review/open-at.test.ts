import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lineId, openFormHref, openFormOf } from './open-at';

describe('the open form in the address', () => {
	it('comes back as it was written, whatever the place', () => {
		const kind = fc.constantFrom('remark' as const, 'answer' as const, 'figure' as const);
		fc.assert(
			fc.property(kind, fc.string({ minLength: 1 }), (kind, at) => {
				const url = new URL(openFormHref({ kind, at }), 'https://noonmark.example/reports/1/review');
				expect(openFormOf(url.searchParams)).toEqual({ kind, at });
				expect(url.hash).toBe('#form');
			}),
			{ examples: [['remark', 'run:1/input:a&b=c#d']] }
		);
	});

	it('is none where the address names none', () => {
		expect(openFormOf(new URLSearchParams('done=remark&remark='))).toBeNull();
	});

	it('names each line by an id that an address can hold', () => {
		expect(lineId('run:0a-1/input:bondAlbedo')).toBe('line-run_0a-1_input_bondAlbedo');
		expect(lineId('run:0a-1/caution:heavy-tails~2')).toBe('line-run_0a-1_caution_heavy-tails_2');
	});
});
