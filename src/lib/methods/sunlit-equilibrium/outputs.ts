import type { OutputSpec } from '../types';

const temperature = { quantity: 'temperature', unit: 'K', period: 'instant' } as const;

export const outputs: readonly OutputSpec[] = [
	{
		...temperature,
		id: 'sunlitMeanTemperature',
		symbol: '\\overline{T}_\\mathrm{lit}',
		name: 'sunlit mean temperature',
		label: 'Mean over the sunlit side',
		area: 'sunlit-hemisphere',
		temperatureKind: 'skin',
		primary: true
	},
	{
		...temperature,
		id: 'subsolarTemperature',
		symbol: 'T_\\mathrm{ss}',
		name: 'subsolar temperature',
		label: 'Subsolar point',
		area: 'point',
		temperatureKind: 'skin'
	},
	{
		...temperature,
		id: 'equilibriumTemperature',
		symbol: 'T_\\mathrm{eq}',
		name: 'equilibrium temperature',
		label: 'Evenly spread',
		area: 'whole-sphere',
		temperatureKind: 'equilibrium'
	},
	{
		...temperature,
		id: 'wholeSphereMeanTemperature',
		symbol: '\\overline{T}',
		name: 'whole-sphere mean temperature',
		label: 'Mean over the whole body',
		area: 'whole-sphere',
		temperatureKind: 'skin',
		primary: true,
		needs: ['nightTemperature']
	},
	{
		...temperature,
		id: 'quarticMeanTemperature',
		symbol: 'T_4',
		name: 'fourth root of the mean of the fourth power',
		label: 'Fourth root of the mean of T⁴, whole body',
		area: 'whole-sphere',
		temperatureKind: 'equilibrium',
		needs: ['nightTemperature']
	},
	{
		id: 'energyResidual',
		symbol: 'R',
		name: 'energy residual',
		label: 'Emitted by the night side, supplied by nothing',
		quantity: 'irradiance',
		unit: 'W/m^2',
		area: 'whole-sphere',
		period: 'instant',
		needs: ['nightTemperature']
	}
];
