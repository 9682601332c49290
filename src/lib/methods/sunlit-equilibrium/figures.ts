import { attachUnit, formatNumber } from '../../quantities';
import type { Series } from '../../calculation/types';
import type { FigureSpec } from '../types';

const kelvin = (value: number | undefined) => attachUnit(formatNumber(value ?? NaN, 1), 'K');

function ends(series: Series, id: string): [string, string] {
	const values = series.curves.find((curve) => curve.id === id)?.values ?? [];
	return [kelvin(values[0]), kelvin(values.at(-1))];
}

export const figures: readonly FigureSpec[] = [
	{
		series: 'temperatureOverZenithAngle',
		title: 'Surface temperature over the angle of the Sun',
		finding(series, outputs) {
			const [first] = ends(series, 'surfaceTemperature');
			return `Only the point under the Sun reaches ${first}; the mean over the sunlit side is ${kelvin(outputs.sunlitMeanTemperature?.value)}, and the edge falls to zero where nothing stores heat.`;
		}
	},
	{
		series: 'meansOverAlbedo',
		title: 'Each mean over Bond albedo',
		finding(series) {
			const [first, last] = ends(series, 'sunlitMeanTemperature');
			return `The mean of the sunlit side falls from ${first} for a body that reflects nothing to ${last} for one that reflects nine tenths.`;
		}
	},
	{
		series: 'meansOverDistance',
		title: 'Each mean over distance from the Sun',
		finding(series) {
			const [first, last] = ends(series, 'subsolarTemperature');
			return `The hottest point cools from ${first} to ${last} over this range of distance; the means keep their order throughout.`;
		}
	}
];
