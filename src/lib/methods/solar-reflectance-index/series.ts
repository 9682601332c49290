import { evenly, HeldColumns, Scratch } from '../curves';
import type { CurveFamily } from '../types';
import { evaluate } from './solve';

const ids = ['surfaceTemperature', 'solarReflectanceIndex', 'approximateIndex'];

/** The standard's convection coefficients for low, medium and high wind, W m^-2 K^-1. */
const winds = [
	{ id: 'lowWind', name: 'low wind', h: 5, role: 'sunlit' },
	{ id: 'mediumWind', name: 'medium wind', h: 12, role: 'neutral' },
	{ id: 'highWind', name: 'high wind', h: 30, role: 'shade' }
] as const;

export function families(): Record<string, CurveFamily> {
	const reflectances = evenly(0, 1, 41);
	const coefficients = evenly(5, 30, 26);
	const held = new HeldColumns('solarReflectance');
	const heldWind = new HeldColumns('convectionCoefficient');
	const scratch = new Scratch(ids);
	return {
		indexOverReflectance: {
			x: { id: 'solarReflectance', name: 'solar reflectance', unit: '', values: reflectances },
			curves: [{ id: 'solarReflectanceIndex', name: 'index', unit: '', role: 'sunlit' }],
			banded: true,
			evaluate: (index, inputs, n, out) =>
				evaluate(held.at(reflectances[index] as number, inputs, n), n, scratch.beside(out, n))
		},
		temperatureOverReflectance: {
			x: { id: 'solarReflectance', name: 'solar reflectance', unit: '', values: reflectances },
			curves: winds.map(({ id, name, role }) => ({ id, name, unit: 'K', role })),
			banded: false,
			evaluate(index, inputs, n, out) {
				const bright = held.at(reflectances[index] as number, inputs, n);
				for (const { id, h } of winds) {
					const shown = { surfaceTemperature: out[id] as Float64Array };
					evaluate(heldWind.at(h, bright, n), n, scratch.beside(shown, n));
				}
			}
		},
		temperatureOverConvection: {
			x: {
				id: 'convectionCoefficient',
				name: 'convection coefficient',
				unit: 'W/(m^2 K)',
				values: coefficients
			},
			curves: [{ id: 'surfaceTemperature', name: 'surface', unit: 'K', role: 'sunlit' }],
			banded: true,
			evaluate: (index, inputs, n, out) =>
				evaluate(heldWind.at(coefficients[index] as number, inputs, n), n, scratch.beside(out, n))
		}
	};
}
