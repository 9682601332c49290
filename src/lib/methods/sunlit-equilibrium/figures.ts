import type { Series } from '../../calculation/types';
import { inKelvin } from '../in-kelvin';
import type { FigureSpec } from '../types';

function ends(series: Series, id: string, temperature: (kelvin: number) => string): [string, string] {
	const values = series.curves.find((curve) => curve.id === id)?.values ?? [];
	return [temperature(values[0] ?? NaN), temperature(values.at(-1) ?? NaN)];
}

export const figures: readonly FigureSpec[] = [
	{
		series: 'temperatureOverZenithAngle',
		title: 'Surface temperature over the angle of the Sun',
		finding(series, outputs, temperature = inKelvin) {
			const [first] = ends(series, 'surfaceTemperature', temperature);
			return `Only the point under the Sun reaches ${first}; the mean over the sunlit side is ${temperature(outputs.sunlitMeanTemperature?.value ?? NaN)}, and the edge falls to absolute zero where nothing stores heat.`;
		}
	},
	{
		series: 'meansOverAlbedo',
		title: 'Each mean over Bond albedo',
		finding(series, _outputs, temperature = inKelvin) {
			const [first, last] = ends(series, 'sunlitMeanTemperature', temperature);
			return `The mean of the sunlit side falls from ${first} for a body that reflects nothing to ${last} for one that reflects nine tenths.`;
		}
	},
	{
		series: 'meansOverDistance',
		title: 'Each mean over distance from the Sun',
		finding(series, _outputs, temperature = inKelvin) {
			const [first, last] = ends(series, 'subsolarTemperature', temperature);
			return `The hottest point cools from ${first} to ${last} over this range of distance; the means keep their order throughout.`;
		}
	}
];
