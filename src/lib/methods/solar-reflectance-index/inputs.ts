import type { NumberInput } from '../types';

const standard = 'astm-e1980';

export const inputs: readonly NumberInput[] = [
	{
		kind: 'number',
		id: 'solarReflectance',
		symbol: 'R',
		name: 'solar reflectance',
		question: 'What share of the sunlight does the surface reflect?',
		help: 'Over the whole solar spectrum, new or aged as stated by the test. Trade term: solar reflectance.',
		quantity: 'ratio',
		unit: '',
		units: ['', '%'],
		domain: { low: 0, high: 1 },
		group: 'surface'
	},
	{
		kind: 'number',
		id: 'thermalEmittance',
		symbol: '\\varepsilon',
		name: 'thermal emittance',
		question: 'How well does the surface radiate heat?',
		help: 'Compared with a black surface at the same temperature. Bare metal radiates poorly. Trade term: thermal emittance.',
		quantity: 'ratio',
		unit: '',
		units: ['', '%'],
		domain: { low: 0, high: 1, lowOpen: true },
		validity: { low: 0.1, high: 1, source: standard },
		group: 'surface'
	},
	{
		kind: 'number',
		id: 'convectionCoefficient',
		symbol: 'h_\\mathrm{c}',
		name: 'convection coefficient',
		question: 'How strongly does the wind cool it?',
		help: 'The standard takes 5 for low, 12 for medium and 30 W m⁻² K⁻¹ for high wind. Trade term: convection coefficient.',
		quantity: 'heat-transfer-coefficient',
		unit: 'W/(m^2 K)',
		units: ['W/(m^2 K)', 'Btu/(h ft^2 degF)'],
		default: { value: 12, source: standard },
		domain: { low: 0, high: null, lowOpen: true },
		validity: { low: 5, high: 30, source: standard },
		group: 'surroundings'
	},
	{
		kind: 'number',
		id: 'irradiance',
		symbol: 'S',
		name: 'solar irradiance',
		question: 'How much sunlight falls on it?',
		help: 'Power per square metre of the surface. The standard takes 1000 W m⁻². Trade term: solar irradiance.',
		quantity: 'irradiance',
		unit: 'W/m^2',
		units: ['W/m^2', 'Btu/(h ft^2)'],
		default: { value: 1000, source: standard },
		domain: { low: 0, high: null, lowOpen: true },
		group: 'surroundings'
	},
	{
		kind: 'number',
		id: 'airTemperature',
		symbol: 'T_\\mathrm{air}',
		name: 'air temperature',
		question: 'How warm is the air?',
		help: 'The standard takes 310 K. Trade term: air temperature.',
		quantity: 'temperature',
		unit: 'K',
		units: ['K', 'degC', 'degF'],
		default: { value: 310, source: standard },
		domain: { low: 0, high: null, lowOpen: true },
		group: 'surroundings'
	},
	{
		kind: 'number',
		id: 'skyTemperature',
		symbol: 'T_\\mathrm{sky}',
		name: 'sky temperature',
		question: 'How warm does the sky look to the surface?',
		help: 'Temperature of a black sky that would send down as much heat. The standard takes 300 K. Trade term: sky temperature.',
		quantity: 'temperature',
		unit: 'K',
		units: ['K', 'degC', 'degF'],
		default: { value: 300, source: standard },
		domain: { low: 0, high: null },
		group: 'surroundings'
	}
];
