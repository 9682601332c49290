import type { Equation } from '../types';

const sigma = '5.670374419\\times 10^{-8}\\,\\mathrm{W}\\,\\mathrm{m}^{-2}\\,\\mathrm{K}^{-4}';

export const equations: readonly Equation[] = [
	{
		id: 'subsolar',
		title: 'The point with the Sun overhead',
		tex: 'T_\\mathrm{ss} = \\left( \\frac{S\\,(1 - A)}{\\varepsilon\\,\\sigma} \\right)^{1/4}',
		put: (n) =>
			`T_\\mathrm{ss} = \\left( \\frac{${n.input('irradiance')} \\times (1 - ${n.input('bondAlbedo')})}{${n.input('emissivity')} \\times ${sigma}} \\right)^{1/4} = ${n.output('subsolarTemperature')}`,
		spoken:
			'The subsolar temperature is the fourth root of the irradiance times one minus the albedo, divided by the emissivity times the Stefan-Boltzmann constant.',
		citation: 'williams-2017',
		outputs: ['subsolarTemperature']
	},
	{
		id: 'local',
		title: 'Any point of the sunlit side, Sun at the angle θ from overhead',
		tex: 'T(\\theta) = T_\\mathrm{ss}\\,\\cos^{1/4}\\theta',
		put: () => undefined,
		spoken:
			'The temperature at the angle theta is the subsolar temperature times the fourth root of the cosine of theta.',
		citation: 'williams-2017',
		outputs: []
	},
	{
		id: 'sunlit-mean',
		title: 'Area mean over the sunlit hemisphere',
		tex: '\\overline{T}_\\mathrm{lit} = \\int_0^{\\pi/2} T_\\mathrm{ss}\\cos^{1/4}\\theta\\,\\sin\\theta\\,\\mathrm{d}\\theta = \\tfrac{4}{5}\\,T_\\mathrm{ss}',
		put: (n) =>
			`\\overline{T}_\\mathrm{lit} = \\tfrac{4}{5} \\times ${n.output('subsolarTemperature')} = ${n.output('sunlitMeanTemperature')}`,
		spoken: 'The mean over the sunlit hemisphere is four fifths of the subsolar temperature.',
		citation: 'vasavada-2012',
		outputs: ['sunlitMeanTemperature']
	},
	{
		id: 'equilibrium',
		title: 'The same heat spread evenly over the whole body',
		tex: 'T_\\mathrm{eq} = \\frac{T_\\mathrm{ss}}{\\sqrt{2}}',
		put: (n) =>
			`T_\\mathrm{eq} = \\frac{${n.output('subsolarTemperature')}}{\\sqrt{2}} = ${n.output('equilibriumTemperature')}`,
		spoken: 'The equilibrium temperature is the subsolar temperature divided by the square root of two.',
		citation: 'codata-2018',
		outputs: ['equilibriumTemperature']
	},
	{
		id: 'whole-sphere-mean',
		title: 'Area mean over the whole body, with the given night side',
		tex: '\\overline{T} = \\frac{\\overline{T}_\\mathrm{lit} + T_\\mathrm{n}}{2}',
		put: (n) =>
			n.value('nightTemperature') === undefined
				? undefined
				: `\\overline{T} = \\frac{${n.output('sunlitMeanTemperature')} + ${n.input('nightTemperature')}}{2} = ${n.output('wholeSphereMeanTemperature')}`,
		spoken: 'The mean over the whole body is half the sum of the sunlit mean and the night temperature.',
		citation: 'williams-2017',
		outputs: ['wholeSphereMeanTemperature']
	},
	{
		id: 'quartic-mean',
		title: 'Fourth root of the area mean of T⁴',
		tex: 'T_4 = \\left( \\frac{T_\\mathrm{ss}^4}{4} + \\frac{T_\\mathrm{n}^4}{2} \\right)^{1/4}',
		put: (n) =>
			n.value('nightTemperature') === undefined
				? undefined
				: `T_4 = \\left( \\frac{(${n.output('subsolarTemperature')})^4}{4} + \\frac{(${n.input('nightTemperature')})^4}{2} \\right)^{1/4} = ${n.output('quarticMeanTemperature')}`,
		spoken:
			'The quartic mean is the fourth root of one quarter of the fourth power of the subsolar temperature plus one half of the fourth power of the night temperature.',
		citation: 'codata-2018',
		outputs: ['quarticMeanTemperature']
	},
	{
		id: 'energy-residual',
		title: 'What the night side emits and nothing supplies',
		tex: 'R = \\tfrac{1}{2}\\,\\varepsilon\\,\\sigma\\,T_\\mathrm{n}^4',
		put: (n) =>
			n.value('nightTemperature') === undefined
				? undefined
				: `R = \\tfrac{1}{2} \\times ${n.input('emissivity')} \\times ${sigma} \\times (${n.input('nightTemperature')})^4 = ${n.output('energyResidual')}`,
		spoken:
			'The residual is one half times the emissivity times the Stefan-Boltzmann constant times the fourth power of the night temperature.',
		citation: 'codata-2018',
		outputs: ['energyResidual']
	}
];
