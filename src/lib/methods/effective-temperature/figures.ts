import { inKelvin } from '../in-kelvin';
import type { FigureSpec } from '../types';

/** "254.0 K to 143.2 K": the ends of a curve, for a caption. */
function ends(values: readonly number[], temperature: (kelvin: number) => string): [string, string] {
	return [temperature(values[0] ?? NaN), temperature(values.at(-1) ?? NaN)];
}

export const figures: readonly FigureSpec[] = [
	{
		series: 'temperatureOverAlbedo',
		title: 'Effective temperature over Bond albedo',
		finding(series, _outputs, temperature = inKelvin) {
			const [first, last] = ends(series.curves[0]?.values ?? [], temperature);
			return `The brighter the body, the colder it is: from ${first} where it reflects nothing to ${last} where it reflects nine tenths.`;
		}
	},
	{
		series: 'temperatureOverIrradiance',
		title: 'Effective temperature over irradiance',
		finding(series, _outputs, temperature = inKelvin) {
			const [first, last] = ends(series.curves[0]?.values ?? [], temperature);
			return `Eight times the sunlight raises the effective temperature from ${first} to ${last}, because it follows the fourth root.`;
		}
	}
];
