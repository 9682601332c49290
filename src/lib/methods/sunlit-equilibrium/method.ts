import { codata, iauB3, nominalSolarIrradiance } from '../constants';
import { irradiancePeriodOption, withPeriod } from '../irradiance-period';
import type { Method } from '../types';
import { albedoKind } from './albedo-kind';
import { equations } from './equations';
import { figures } from './figures';
import { outputs } from './outputs';
import { families } from './series';
import { evaluate } from './solve';

export const sunlitEquilibrium: Method = {
	id: 'sunlit-equilibrium',
	version: '1.0.0',
	title: 'Sunlit side, local balance',
	answers: 'How hot the ground gets where the Sun shines, if every spot radiates away what it absorbs.',
	averages:
		'It gives the point under the Sun and the mean over the sunlit half; a mean over the whole body only with a night temperature that you supply.',
	leavesOut: [
		'Storage of heat in the ground: mornings come out too warm and evenings too cold.',
		'Heat carried from one place to another, by air, water or the ground.',
		'A change of reflectance with the angle of the Sun.',
		'Slopes, shadows and roughness: the body is a smooth sphere.'
	],
	groups: [
		{ id: 'light', title: 'Light and surface' },
		{ id: 'night', title: 'Night side' }
	],
	inputs: [
		{
			kind: 'number',
			id: 'irradiance',
			symbol: 'S',
			name: 'solar irradiance',
			question: 'How much sunlight arrives?',
			help: 'Power per square metre facing the Sun, at the body. Trade term: solar irradiance.',
			quantity: 'irradiance',
			unit: 'W/m^2',
			units: ['W/m^2', 'kW/m^2', 'Btu/(h ft^2)'],
			default: { value: nominalSolarIrradiance, source: 'iau-2015-b3' },
			domain: { low: 0, high: null, lowOpen: true },
			group: 'light'
		},
		{
			kind: 'number',
			id: 'bondAlbedo',
			symbol: 'A',
			name: 'Bond albedo',
			question: 'What share of it is reflected to space?',
			help: 'Over all wavelengths and directions. A brightness seen from one side (geometric albedo) is a different number. Trade term: Bond albedo.',
			quantity: 'ratio',
			unit: '',
			units: ['', '%'],
			domain: { low: 0, high: 1 },
			group: 'light'
		},
		{
			kind: 'number',
			id: 'emissivity',
			symbol: '\\varepsilon',
			name: 'emissivity',
			question: 'How well does the surface radiate heat?',
			help: 'Compared with a black body at the same temperature. Trade term: emissivity.',
			quantity: 'ratio',
			unit: '',
			units: ['', '%'],
			default: { value: 1, source: 'Black body assumed.' },
			domain: { low: 0, high: 1, lowOpen: true },
			group: 'light'
		},
		{
			kind: 'number',
			id: 'nightTemperature',
			symbol: 'T_\\mathrm{n}',
			name: 'night-side temperature',
			question: 'How warm is the night side?',
			help: 'Mean over the dark half, from a measurement or another method. Leave it empty if it is not known: the mean over the whole body is then left out. Trade term: night-side temperature.',
			quantity: 'temperature',
			unit: 'K',
			units: ['K', 'degC', 'degF'],
			optional: true,
			domain: { low: 0, high: null },
			group: 'night'
		}
	],
	alternatives: [],
	options: [irradiancePeriodOption('instant', 'light')],
	outputs,
	equations,
	citations: [
		{
			id: 'williams-2017',
			text: 'Williams, J.-P., Paige, D. A., Greenhagen, B. T. and Sefton-Nash, E. (2017): The global surface temperatures of the Moon as measured by the Diviner Lunar Radiometer Experiment. Icarus 283, 300–325.',
			doi: '10.1016/j.icarus.2016.08.012'
		},
		{
			id: 'vasavada-2012',
			text: 'Vasavada, A. R., Bandfield, J. L., Greenhagen, B. T., Hayne, P. O., Siegler, M. A., Williams, J.-P. and Paige, D. A. (2012): Lunar equatorial surface temperatures and regolith properties from the Diviner Lunar Radiometer Experiment. Journal of Geophysical Research 117, E00H18.',
			doi: '10.1029/2011JE003987'
		},
		codata,
		iauB3
	],
	figures,
	prepare(setting) {
		const night = setting.has('nightTemperature');
		const columns = ['irradiance', 'bondAlbedo', 'emissivity'];
		return {
			columns: night ? [...columns, 'nightTemperature'] : columns,
			outputs: withPeriod(
				outputs.filter(({ needs }) => needs === undefined || night),
				setting.options.irradiancePeriod
			),
			evaluate,
			series: families(setting)
		};
	},
	cautions: albedoKind,
	history: [{ version: '1.0.0', date: '2026-12-01', change: 'First version.' }]
};
