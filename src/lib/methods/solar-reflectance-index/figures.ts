import { formatNumber } from '../../quantities';
import { inKelvin } from '../in-kelvin';
import type { FigureSpec } from '../types';

export const figures: readonly FigureSpec[] = [
	{
		series: 'indexOverReflectance',
		title: 'Solar reflectance index over solar reflectance',
		finding(series) {
			const values = series.curves[0]?.values ?? [];
			const per = ((values.at(-1) ?? NaN) - (values[0] ?? NaN)) / 10;
			return `A tenth more of the sunlight reflected raises the index by about ${formatNumber(per, 0)} at this emittance and wind.`;
		}
	},
	{
		series: 'temperatureOverReflectance',
		title: 'Surface temperature over solar reflectance',
		finding(series, _outputs, temperature = inKelvin) {
			const low = series.curves.find(({ id }) => id === 'lowWind')?.values[0];
			const high = series.curves.find(({ id }) => id === 'highWind')?.values[0];
			return `Wind matters most on a dark surface: one that reflects nothing reaches ${temperature(low ?? NaN)} in low and ${temperature(high ?? NaN)} in high wind.`;
		}
	},
	{
		series: 'temperatureOverConvection',
		title: 'Surface temperature over the convection coefficient',
		finding(series, _outputs, temperature = inKelvin) {
			const values = series.curves[0]?.values ?? [];
			return `From the standard's low to its high wind the surface cools from ${temperature(values[0] ?? NaN)} to ${temperature(values.at(-1) ?? NaN)}.`;
		}
	}
];
