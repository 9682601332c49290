import { codata, iauB3, nominalSolarIrradiance } from '../constants';
import { irradiancePeriodOption, withPeriod } from '../irradiance-period';
import type { Method, OutputSpec } from '../types';
import { equations } from './equations';
import { figures } from './figures';
import { families } from './series';
import { evaluate } from './solve';

const outputs: readonly OutputSpec[] = [
	{
		id: 'effectiveTemperature',
		symbol: 'T_\\mathrm{e}',
		name: 'effective temperature',
		label: 'Effective temperature of the whole body',
		quantity: 'temperature',
		unit: 'K',
		area: 'whole-sphere',
		period: 'orbit',
		temperatureKind: 'effective',
		primary: true
	},
	{
		id: 'equilibriumTemperature',
		symbol: 'T_\\mathrm{eq}',
		name: 'equilibrium temperature',
		label: 'Evenly spread over the whole body',
		quantity: 'temperature',
		unit: 'K',
		area: 'whole-sphere',
		period: 'orbit',
		temperatureKind: 'equilibrium'
	},
	{
		id: 'absorbedFlux',
		symbol: 'F',
		name: 'mean absorbed flux',
		label: 'Absorbed sunlight, mean over the whole body',
		quantity: 'irradiance',
		unit: 'W/m^2',
		area: 'whole-sphere',
		period: 'orbit'
	},
	{
		id: 'temperatureDifference',
		symbol: '\\Delta T',
		name: 'observed minus effective temperature',
		label: 'Observed minus effective temperature',
		quantity: 'temperature-difference',
		unit: 'K',
		area: 'whole-sphere',
		period: 'orbit',
		needs: ['observedTemperature']
	}
];

export const effectiveTemperature: Method = {
	id: 'effective-temperature',
	version: '1.0.0',
	title: 'Whole body, effective temperature',
	answers: 'How warm a black body would be that sends out as much heat as this whole body takes in.',
	averages:
		'It averages the heat that leaves the whole body, not the temperature of its surface: the mean surface temperature of a body that is not evenly warm lies below it.',
	leavesOut: [
		'Differences between day and night, equator and poles: the heat is taken as evenly spread.',
		'Any atmosphere: what warms the ground below one is not in this number.',
		'Storage of heat: what comes in is taken to leave over the averaging period.'
	],
	groups: [
		{ id: 'light', title: 'Light and surface' },
		{ id: 'inside', title: 'Heat from inside' },
		{ id: 'observed', title: 'Observed temperature' }
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
			domain: { low: 0, high: null },
			group: 'light'
		},
		{
			kind: 'number',
			id: 'bondAlbedo',
			symbol: 'A',
			name: 'Bond albedo',
			question: 'What share of it is reflected to space?',
			help: 'Over all wavelengths and directions, clouds included. A brightness seen from one side (geometric albedo) is a different number. Trade term: Bond albedo.',
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
			question: 'How well does the body radiate heat?',
			help: 'Compared with a black body at the same temperature. It changes the equilibrium temperature only. Trade term: emissivity.',
			quantity: 'ratio',
			unit: '',
			units: ['', '%'],
			default: { value: 1, source: 'Black body, by definition of the effective temperature.' },
			domain: { low: 0, high: 1, lowOpen: true },
			group: 'light'
		},
		{
			kind: 'number',
			id: 'internalFlux',
			symbol: 'q',
			name: 'internal heat flux',
			question: 'How much heat comes from inside?',
			help: 'Mean over the whole surface. Small for rocky bodies, large for giant planets. Trade term: internal heat flux.',
			quantity: 'irradiance',
			unit: 'W/m^2',
			units: ['W/m^2'],
			default: { value: 0, source: 'None assumed.' },
			domain: { low: 0, high: null },
			group: 'inside'
		},
		{
			kind: 'number',
			id: 'observedTemperature',
			symbol: 'T_\\mathrm{obs}',
			name: 'observed temperature',
			question: 'Which temperature was observed, if one was?',
			help: 'Leave empty if there is none. The difference to the effective temperature is a defined quantity, not a test of either. Trade term: observed temperature.',
			quantity: 'temperature',
			unit: 'K',
			units: ['K', 'degC', 'degF'],
			optional: true,
			domain: { low: 0, high: null },
			group: 'observed'
		}
	],
	alternatives: [],
	options: [
		irradiancePeriodOption('orbit', 'light'),
		{
			id: 'observedArea',
			name: 'area of the observed temperature',
			question: 'Where was it observed?',
			help: 'What the observed number averages over. Trade term: averaging area.',
			default: 'whole-sphere',
			choices: [
				{ value: 'whole-sphere', label: 'over the whole body' },
				{ value: 'sunlit-hemisphere', label: 'over the sunlit half' },
				{ value: 'site', label: 'at one site' },
				{ value: 'point', label: 'at the hottest or a named point' },
				{ value: 'not-stated', label: 'not stated' }
			],
			group: 'observed'
		},
		{
			id: 'observedKind',
			name: 'kind of the observed temperature',
			question: 'Which temperature was it?',
			help: 'The surface itself, what an instrument reads from its radiation, or the air above it. Trade term: kind of temperature.',
			default: 'skin',
			choices: [
				{ value: 'skin', label: 'of the surface itself' },
				{ value: 'radiometric', label: 'read from its radiation' },
				{ value: 'air-2m', label: 'of the air at 2 m' },
				{ value: 'effective', label: 'effective temperature from emitted heat' },
				{ value: 'equilibrium', label: 'a computed equilibrium temperature' },
				{ value: 'not-stated', label: 'not stated' }
			],
			group: 'observed'
		}
	],
	outputs,
	equations,
	citations: [codata, iauB3],
	figures,
	prepare(setting) {
		const observed = setting.has('observedTemperature');
		const columns = ['irradiance', 'bondAlbedo', 'emissivity', 'internalFlux'];
		return {
			columns: observed ? [...columns, 'observedTemperature'] : columns,
			outputs: withPeriod(
				outputs.filter(({ needs }) => needs === undefined || observed),
				setting.options.irradiancePeriod
			),
			evaluate,
			series: families(setting)
		};
	},
	cautions: () => [],
	history: [{ version: '1.0.0', date: '2026-12-01', change: 'First version.' }]
};
