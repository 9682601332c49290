import type { Equation } from '../types';

export const equations: readonly Equation[] = [
	{
		id: 'absorbed-flux',
		title: 'Absorbed sunlight, spread over the whole surface',
		tex: 'F = \\frac{S\\,(1 - A)}{4}',
		put: (n) =>
			`F = \\frac{${n.input('irradiance')} \\times (1 - ${n.input('bondAlbedo')})}{4} = ${n.output('absorbedFlux')}`,
		spoken:
			'The mean absorbed flux F is the irradiance S times one minus the Bond albedo A, divided by four.',
		citation: 'iau-2015-b3',
		outputs: ['absorbedFlux']
	},
	{
		id: 'effective-temperature',
		title: 'Effective temperature',
		tex: 'T_\\mathrm{e} = \\left( \\frac{F + q}{\\sigma} \\right)^{1/4}',
		put: (n) =>
			`T_\\mathrm{e} = \\left( \\frac{${n.output('absorbedFlux')} + ${n.input('internalFlux')}}{5.670374419\\times 10^{-8}\\,\\mathrm{W}\\,\\mathrm{m}^{-2}\\,\\mathrm{K}^{-4}} \\right)^{1/4} = ${n.output('effectiveTemperature')}`,
		spoken:
			'The effective temperature is the fourth root of the absorbed flux plus the internal flux, divided by the Stefan-Boltzmann constant.',
		citation: 'codata-2018',
		outputs: ['effectiveTemperature']
	},
	{
		id: 'equilibrium-temperature',
		title: 'Equilibrium temperature of an evenly warm body',
		tex: 'T_\\mathrm{eq} = \\left( \\frac{F + q}{\\varepsilon\\,\\sigma} \\right)^{1/4}',
		put: (n) =>
			`T_\\mathrm{eq} = \\left( \\frac{${n.output('absorbedFlux')} + ${n.input('internalFlux')}}{${n.input('emissivity')} \\times 5.670374419\\times 10^{-8}\\,\\mathrm{W}\\,\\mathrm{m}^{-2}\\,\\mathrm{K}^{-4}} \\right)^{1/4} = ${n.output('equilibriumTemperature')}`,
		spoken:
			'The equilibrium temperature is the fourth root of the absorbed flux plus the internal flux, divided by the emissivity times the Stefan-Boltzmann constant.',
		citation: 'codata-2018',
		outputs: ['equilibriumTemperature']
	},
	{
		id: 'temperature-difference',
		title: 'Observed minus effective temperature',
		tex: '\\Delta T = T_\\mathrm{obs} - T_\\mathrm{e}',
		put: (n) =>
			n.value('observedTemperature') === undefined
				? undefined
				: `\\Delta T = ${n.input('observedTemperature')} - ${n.output('effectiveTemperature')} = ${n.output('temperatureDifference')}`,
		spoken: 'The difference is the observed temperature minus the effective temperature.',
		citation: 'codata-2018',
		outputs: ['temperatureDifference']
	}
];
