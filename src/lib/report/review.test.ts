import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { OutputResult } from '../calculation/types';
import type { OutputSpec } from '../methods/types';
import type { ReviewerFigureSource } from './source';
import { averagesOf, comparisonSentence, figureNumbers, figureText, sameAverage } from './reviewer-figure';
import { compareLines, type ReportLine } from './lines';

const spec: OutputSpec = {
	id: 'sunlitMeanTemperature',
	symbol: 'T',
	name: 'mean temperature of the sunlit side',
	label: 'Mean over the sunlit side',
	quantity: 'temperature',
	unit: 'K',
	area: 'sunlit-hemisphere',
	period: 'instant',
	temperatureKind: 'equilibrium'
};
const output: OutputResult = {
	value: 249.05,
	mean: 249.05,
	unit: 'K',
	standardUncertainty: 0.8,
	interval: { low: 247.4, high: 250.6, coverage: 0.95, kind: 'symmetric' } as OutputResult['interval']
};
const own = averagesOf(spec);

function figure(change: Partial<ReviewerFigureSource> = {}): ReviewerFigureSource {
	return {
		runId: 'run',
		output: spec.id,
		kind: 'value',
		value: '-22.0',
		unit: 'degC',
		giveOrTake: '',
		averages: own,
		route: 'By hand',
		by: { name: 'Idris Venn' },
		...change
	};
}
const said = (change: Partial<ReviewerFigureSource> = {}, beside = output) =>
	comparisonSentence(figure(change), spec, beside, 'degC');

describe('a reviewer’s figure', () => {
	it('is printed as typed, with a real minus sign and no plus-minus', () => {
		expect(figureText(figure({ giveOrTake: '1.5' }))).toBe('−22.0\u00a0°C, give or take 1.5\u00a0K');
		expect(figureText(figure({ kind: 'upper-bound', value: '70', unit: 'degF' }))).toBe(
			'not above 70\u00a0°F'
		);
		expect(figureText(figure({ kind: 'lower-bound', value: '0.5', unit: '' }))).toBe('not below 0.5');
	});

	it('of the same average is told by its distance and against the interval, in the report’s scale', () => {
		// −22.0 °C is 251.15 K: 2.1 K above 249.05 K and outside 247.4 K to 250.6 K.
		expect(said()).toBe(
			'The reviewer’s figure lies 2.1\u00a0K above the result. It is outside the result’s 95\u202f% coverage interval.'
		);
		expect(said({ giveOrTake: '1' })).toContain(
			'Its range overlaps with the result’s 95\u202f% coverage interval.'
		);
		expect(said({ giveOrTake: '0.1' })).toContain('Its range does not overlap');
		expect(said({ value: '249.05', unit: 'K' })).toContain('At the digits printed');
		expect(said({ value: '249.5', unit: 'K' })).toContain('within');
		expect(said({}, { value: 249, unit: 'K' })).toContain('No interval of the result was worked out');
		const exact = { ...output, interval: { ...output.interval, low: 249.05, high: 249.05 } } as OutputResult;
		expect(said({}, exact)).toContain('No interval of the result was worked out');
		expect(said({ kind: 'upper-bound', unit: 'K', value: '260' }, exact)).toBe(
			'The result lies below the reviewer’s upper bound.'
		);
	});

	it('of another or an unknown average is not compared', () => {
		for (const averages of ['', '  ', 'the whole sheet at noon', 'the whole sphere, over a day']) {
			const text = said({ averages });
			expect(text).toContain('not compared');
			expect(text).not.toMatch(/above|below|within|outside/);
		}
		expect(sameAverage('an area that is not stated', 'an area that is not stated')).toBe(false);
		expect(sameAverage(own.toUpperCase(), ` ${own}. `)).toBe(true);
	});

	it('that is a bound is passed or not, and says how far that carries', () => {
		const upper = { kind: 'upper-bound', unit: 'K' } as const;
		expect(said({ ...upper, value: '260' })).toBe(
			'The result lies below the reviewer’s upper bound, with its whole 95\u202f% coverage interval.'
		);
		expect(said({ ...upper, value: '250' })).toContain('its 95\u202f% coverage interval reaches past it.');
		expect(said({ ...upper, value: '240' })).toBe(
			'The result does not lie below the reviewer’s upper bound.'
		);
		expect(said({ kind: 'lower-bound', value: '200', unit: 'K' })).toContain(
			'lies above the reviewer’s lower bound'
		);
		expect(said({ kind: 'lower-bound', value: '300', unit: 'K' })).toContain('does not lie above');
		expect(said({ ...upper, value: '260', averages: 'the hottest point' })).toContain(
			'only as far as the bound holds for that too'
		);
	});

	it('in a unit that does not convert is not compared', () => {
		expect(figureNumbers(figure({ unit: 'W/m^2' }), spec, 'K')).toBeUndefined();
		expect(said({ unit: 'W/m^2' })).toContain('not compared');
	});

	it('never has anything said of it that sounds like agreement', () => {
		fc.assert(
			fc.property(
				fc.constantFrom('value', 'upper-bound', 'lower-bound'),
				fc.double({ min: -200, max: 900, noNaN: true }),
				fc.constantFrom('', '0', '1', '50'),
				fc.constantFrom(own, '', 'something else'),
				(kind, value, around, averages) => {
					const giveOrTake = kind === 'value' ? around : '';
					const text = said({ kind, value: value.toFixed(2), giveOrTake, averages });
					expect(text).not.toMatch(/agree|consistent|confirm|match|correct|±/i);
				}
			)
		);
	});
});

describe('lines compared', () => {
	const line = (place: string, text: string): ReportLine => ({
		place,
		section: 's',
		label: 'l',
		text,
		source: null
	});

	it('are the same, changed, new or gone, whichever run they stand in now', () => {
		const now = [line('text.answer', 'a'), line('run:two/input:x', '2'), line('text.new', 'n')];
		const before = [line('text.answer', 'a'), line('run:one/input:x', '1'), line('text.old', 'o')];
		const { lines, gone } = compareLines(now, before, (id) => (id === 'two' ? 'one' : id));
		expect(lines.map(({ changed }) => changed)).toEqual([null, { before: '1' }, { before: '' }]);
		expect(gone.map(({ place }) => place)).toEqual(['text.old']);
	});

	it('of a report with itself do not differ', () => {
		fc.assert(
			fc.property(fc.uniqueArray(fc.string(), { maxLength: 8 }), fc.string(), (places, text) => {
				const lines = places.map((place) => line(place, text));
				const compared = compareLines(lines, lines);
				expect(compared.lines.every(({ changed }) => changed === null)).toBe(true);
				expect(compared.gone).toEqual([]);
			})
		);
	});
});
