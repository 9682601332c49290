import { describe, expect, it } from 'vitest';
import { methods } from '$lib/methods';
import { describeMethod, methodLines, rangeInWords } from './describe';

const plain = (text: string) => text.replace(/[\u00a0\u202f]/g, ' ');

describe('rangeInWords', () => {
	it.each([
		[{ low: 0, high: 1 }, '', '0 to 1'],
		[{ low: 0, high: 1, lowOpen: true }, '', '0 to 1, without 0'],
		[{ low: 0, high: 1, highOpen: true }, '', '0 to 1, without 1'],
		[{ low: 0, high: 1, lowOpen: true, highOpen: true }, '', '0 to 1, both ends left out'],
		[{ low: 0, high: null, lowOpen: true }, 'W/m^2', 'above 0 W m⁻²'],
		[{ low: 5, high: null }, 'K', 'at least 5 K'],
		[{ low: null, high: 90 }, 'K', 'at most 90 K'],
		[{ low: null, high: null }, 'K', 'any']
	])('writes %j in %j', (range, unit, words) => {
		expect(plain(rangeInWords(range, unit))).toBe(words);
	});
});

describe('describeMethod', () => {
	it.each(methods.map((method) => [method.id, method] as const))(
		'leaves no gap on the page of %s',
		(_, method) => {
			const page = describeMethod(method);
			expect(page.inputs).toHaveLength(method.inputs.length);
			expect(page.outputs).toHaveLength(method.outputs.length);
			expect(page.history[0]?.version).toBe(method.version);
			// Every equation names a citation that the page lists, and every default says where it comes from.
			for (const equation of page.equations) {
				expect(page.citations.map(({ number }) => number)).toContain(equation.citation);
				expect(equation.spoken).not.toBe('');
			}
			for (const input of page.inputs) if (input.default) expect(input.default.source).not.toBe('');
			for (const { href } of page.citations) if (href) expect(href).toMatch(/^https:\/\//);
			expect(JSON.parse(JSON.stringify(page))).toEqual(page);
		}
	);

	it('lists every method once', () => {
		expect(methodLines().map(({ id }) => id)).toEqual(methods.map(({ id }) => id));
	});
});
