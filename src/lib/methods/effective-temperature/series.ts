import { evenly, HeldColumns, ScaledColumns, Scratch } from '../curves';
import type { CurveFamily, Setting } from '../types';
import { evaluate } from './solve';

const scratchIds = ['absorbedFlux', 'effectiveTemperature', 'equilibriumTemperature'];

const curves: CurveFamily['curves'] = [
	{ id: 'effectiveTemperature', name: 'effective', unit: 'K', role: 'sunlit' },
	{ id: 'equilibriumTemperature', name: 'evenly spread', unit: 'K', role: 'shade' }
];

export function families(setting: Setting): Record<string, CurveFamily> {
	const albedos = evenly(0, 0.9, 37);
	const irradiance = setting.values.irradiance ?? 0;
	const factors = evenly(0.25, 2, 36);
	const held = new HeldColumns('bondAlbedo');
	const scaled = new ScaledColumns('irradiance');
	const scratch = new Scratch(scratchIds);
	// With emissivity 1 the two temperatures are one curve.
	const shown = setting.values.emissivity === 1 ? curves.slice(0, 1) : curves;
	const families: Record<string, CurveFamily> = {
		temperatureOverAlbedo: {
			x: { id: 'bondAlbedo', name: 'Bond albedo', unit: '', values: albedos },
			curves: shown,
			banded: true,
			evaluate: (index, inputs, n, out) =>
				evaluate(held.at(albedos[index] as number, inputs, n), n, scratch.beside(out, n))
		}
	};
	if (irradiance > 0) {
		families.temperatureOverIrradiance = {
			x: {
				id: 'irradiance',
				name: 'solar irradiance',
				unit: 'W/m^2',
				values: factors.map((factor) => factor * irradiance)
			},
			curves: shown,
			banded: true,
			evaluate: (index, inputs, n, out) =>
				evaluate(scaled.by(factors[index] as number, inputs, n), n, scratch.beside(out, n))
		};
	}
	return families;
}
