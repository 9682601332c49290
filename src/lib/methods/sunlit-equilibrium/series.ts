import { cos, pi, quarterRoot } from '../../exact';
import { nominalSolarIrradiance } from '../constants';
import { evenly, HeldColumns, ScaledColumns, Scratch } from '../curves';
import type { CurveFamily, Setting } from '../types';
import { evaluate } from './solve';

const means: CurveFamily['curves'] = [
	{ id: 'subsolarTemperature', name: 'hottest point', unit: 'K', role: 'sunlit' },
	{ id: 'sunlitMeanTemperature', name: 'mean of the sunlit side', unit: 'K', role: 'sunlit' },
	{ id: 'equilibriumTemperature', name: 'evenly spread', unit: 'K', role: 'shade' }
];

const wholeSphereMeans: CurveFamily['curves'] = [
	{ id: 'wholeSphereMeanTemperature', name: 'mean of the whole body', unit: 'K', role: 'shade' },
	{ id: 'quarticMeanTemperature', name: 'fourth root of the mean of T⁴', unit: 'K', role: 'neutral' }
];

const always = ['subsolarTemperature', 'sunlitMeanTemperature', 'equilibriumTemperature'];
const withNight = ['wholeSphereMeanTemperature', 'quarticMeanTemperature', 'energyResidual'];

/** Cosine of a zenith angle in degrees, zero at the horizon. */
function cosine(degrees: number): number {
	return degrees === 90 ? 0 : cos((degrees * pi) / 180);
}

export function families(setting: Setting): Record<string, CurveFamily> {
	const night = setting.has('nightTemperature');
	const scratch = new Scratch(night ? [...always, ...withNight] : always);
	const curves = night ? [...means, ...wholeSphereMeans] : means;
	// Closer towards the edge, where the fourth root of the cosine falls steeply.
	const angles = [...evenly(0, 84, 29), ...evenly(84.5, 89.5, 11), ...evenly(89.75, 90, 2)];
	const albedos = evenly(0, 0.9, 37);
	// The distance at which the nominal Sun gives the stated irradiance; the curve scales around it.
	const distance = Math.sqrt(nominalSolarIrradiance / (setting.values.irradiance ?? nominalSolarIrradiance));
	const ratios = evenly(0.4, 2, 33);
	const held = new HeldColumns('bondAlbedo');
	const scaled = new ScaledColumns('irradiance');
	return {
		temperatureOverZenithAngle: {
			x: { id: 'zenithAngle', name: 'angle of the Sun from overhead', unit: 'deg', values: angles },
			curves: [{ id: 'surfaceTemperature', name: 'surface', unit: 'K', role: 'sunlit' }],
			banded: true,
			evaluate(index, inputs, n, out) {
				const all = scratch.beside({}, n);
				evaluate(inputs, n, all);
				const factor = quarterRoot(cosine(angles[index] as number));
				const subsolar = all.subsolarTemperature as Float64Array;
				const surface = out.surfaceTemperature as Float64Array;
				for (let i = 0; i < n; i++) surface[i] = (subsolar[i] as number) * factor;
			}
		},
		meansOverAlbedo: {
			x: { id: 'bondAlbedo', name: 'Bond albedo', unit: '', values: albedos },
			curves,
			banded: true,
			evaluate: (index, inputs, n, out) =>
				evaluate(held.at(albedos[index] as number, inputs, n), n, scratch.beside(out, n))
		},
		meansOverDistance: {
			x: {
				id: 'distance',
				name: 'distance from the Sun',
				unit: 'au',
				values: ratios.map((ratio) => ratio * distance)
			},
			curves,
			banded: true,
			evaluate(index, inputs, n, out) {
				const ratio = ratios[index] as number;
				evaluate(scaled.by(1 / (ratio * ratio), inputs, n), n, scratch.beside(out, n));
			}
		}
	};
}
