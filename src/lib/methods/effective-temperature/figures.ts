import { attachUnit, formatNumber } from '../../quantities';
import type { FigureSpec } from '../types';

/** "254.0 K to 143.2 K": the ends of a curve, for a caption. */
function ends(values: readonly number[]): [string, string] {
	const write = (value: number | undefined) => attachUnit(formatNumber(value ?? NaN, 1), 'K');
	return [write(values[0]), write(values.at(-1))];
}

export const figures: readonly FigureSpec[] = [
	{
		series: 'temperatureOverAlbedo',
		title: 'Effective temperature over Bond albedo',
		finding(series) {
			const [first, last] = ends(series.curves[0]?.values ?? []);
			return `The brighter the body, the colder it is: from ${first} where it reflects nothing to ${last} where it reflects nine tenths.`;
		}
	},
	{
		series: 'temperatureOverIrradiance',
		title: 'Effective temperature over irradiance',
		finding(series) {
			const [first, last] = ends(series.curves[0]?.values ?? []);
			return `Eight times the sunlight raises the effective temperature from ${first} to ${last}, because it follows the fourth root.`;
		}
	}
];
