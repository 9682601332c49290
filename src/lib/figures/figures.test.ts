import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Series } from '../calculation/types';
import { figureSpec, figureTable, presentSeries, seriesCsv } from '.';
import { placeLabels } from './labels';
import { axisScale } from './scale';

const xs = Array.from({ length: 20 }, (_, i) => i / 19);
const series: Series = {
	x: { id: 'bondAlbedo', name: 'Bond albedo', unit: '', values: xs },
	curves: [
		{
			id: 'a',
			name: 'hottest point',
			unit: 'K',
			role: 'sunlit',
			values: xs.map((x) => 300 - 50 * x),
			low: xs.map((x) => 298 - 50 * x),
			high: xs.map((x) => 302 - 50 * x)
		},
		{ id: 'b', name: 'evenly spread', unit: 'K', role: 'shade', values: xs.map((x) => 200 - 40 * x) }
	]
};

describe('an axis', () => {
	it('holds every value between round ends, on ticks that are in order', () => {
		const finite = fc.double({ min: -1e6, max: 1e6, noNaN: true });
		fc.assert(
			fc.property(fc.array(finite, { minLength: 1, maxLength: 30 }), (values) => {
				const scale = axisScale(values, { ticks: 5, round: true });
				expect(scale.high).toBeGreaterThan(scale.low);
				const slack = (scale.high - scale.low) * 1e-6;
				for (const value of values) {
					expect(value).toBeGreaterThanOrEqual(scale.low - slack);
					expect(value).toBeLessThanOrEqual(scale.high + slack);
				}
				expect(scale.ticks.length).toBeGreaterThanOrEqual(2);
				expect(scale.ticks.length).toBeLessThanOrEqual(8);
				expect([...scale.ticks].sort((a, b) => a - b)).toEqual(scale.ticks);
			})
		);
	});

	it('steps by 1, 2, 2.5 or 5', () => {
		expect(axisScale([0, 0.95], { ticks: 7, round: false }).ticks).toEqual([0, 0.2, 0.4, 0.6, 0.8]);
		expect(axisScale([-273, 38], { ticks: 5, round: true })).toMatchObject({
			low: -300,
			high: 100,
			decimals: 0
		});
	});
});

describe('names at the curves', () => {
	it('cover no curve and stand nearest to their own', () => {
		const line = (y: number, slope: number) => ({
			points: Array.from({ length: 40 }, (_, i) => ({ x: i * 10, y: y + slope * i })),
			labelWidth: 70,
			labelHeight: 11
		});
		const curves = [line(30, 1), line(60, 0.5), line(120, -0.5)];
		const places = placeLabels(curves, { width: 390, height: 200 });
		places.forEach((place, i) => {
			if (!place) throw new Error('no place');
			const distances = curves.map((curve) =>
				Math.min(
					...curve.points.filter((p) => Math.abs(p.x - place.x) <= 35).map((p) => Math.abs(p.y - place.y))
				)
			);
			expect(Math.min(...distances)).toBe(distances[i]);
			expect(Math.min(...distances)).toBeGreaterThan(5.5);
		});
	});

	it('stand elsewhere with a sample of their line where the curves leave no room', () => {
		const flat = (y: number) => ({
			points: [
				{ x: 0, y },
				{ x: 390, y }
			],
			labelWidth: 70,
			labelHeight: 11
		});
		const places = placeLabels([flat(100), flat(108), flat(116)], { width: 390, height: 200 });
		expect(places.map((place) => place?.sample ?? false)).toEqual([false, true, false]);
		const crowded: Series = {
			...series,
			curves: [300, 290, 280].map((level, i) => ({
				id: `c${i}`,
				name: `curve ${i}`,
				unit: 'K',
				role: 'sunlit',
				values: xs.map((x) => level - 250 * x)
			}))
		};
		const spec = JSON.stringify(figureSpec(crowded, { width: 460, height: 140, yName: 'temperature' }));
		// The second curve of one colour is told by its dash, on the line and before its name.
		expect(spec.split('"strokeDash":[7,3]')).toHaveLength(3);
	});
});

describe('a series for a reader', () => {
	it('shows temperatures on the wanted scale and differences unshifted', () => {
		const shown = presentSeries(series, 'degC');
		expect(shown.curves[0]?.unit).toBe('°C');
		expect(shown.curves[0]?.values[0]).toBeCloseTo(26.85, 9);
		expect(shown.curves[0]?.low?.[0]).toBeCloseTo(24.85, 9);
		const spec = { id: 'a', quantity: 'temperature-difference' } as Parameters<
			typeof presentSeries
		>[2] extends readonly (infer O)[] | undefined
			? O
			: never;
		expect(presentSeries(series, 'degC', [spec]).curves[0]?.values[0]).toBe(300);
	});

	it('has a table with a real minus sign and the band beside its curve', () => {
		const table = figureTable(presentSeries(series, 'degC'));
		expect(table.map((column) => column.name)).toEqual([
			'Bond albedo',
			'hottest point',
			'hottest point, low end',
			'hottest point, high end',
			'evenly spread'
		]);
		expect(table[4]?.cells[0]).toBe('−73.15');
		expect(new Set(table.map((column) => column.cells.length))).toEqual(new Set([20]));
	});

	it('gives a CSV that no spreadsheet reads as a formula and that keeps every digit', () => {
		const evil: Series = {
			x: { ...series.x, name: '=cmd()' },
			curves: [{ id: 'c', name: '-1+1,"x"', unit: '', role: 'neutral', values: xs.map((x) => -x / 3) }]
		};
		const [head, , second] = seriesCsv(evil).split('\r\n');
		expect(head).toBe(`'=cmd(),"'-1+1,""x"""`);
		expect(second).toBe(`${xs[1]},${-(xs[1] ?? 0) / 3}`);
	});
});

describe('the drawing', () => {
	it('needs neither legend nor clip and names each curve in its colour', () => {
		const text = JSON.stringify(
			figureSpec(presentSeries(series, 'degC'), { width: 460, height: 140, yName: 'temperature' })
		);
		expect(text).not.toContain('"legend"');
		expect(text).not.toContain('"clip":true');
		expect(text).not.toContain('hsl(');
		for (const curve of series.curves) expect(text).toContain(`"text":"${curve.name}"`);
		expect(text).toContain('temperature, °C');
	});
});
