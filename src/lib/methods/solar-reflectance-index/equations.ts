import { texNumber, texWithUnit } from '../../quantities';
import type { Equation, EquationNumbers } from '../types';
import { blackReflectance, referenceEmittance, solveBalance, whiteReflectance } from './solve';

const sigma = '5.66961\\times 10^{-8}\\,\\mathrm{W}\\,\\mathrm{m}^{-2}\\,\\mathrm{K}^{-4}';

/** Temperature of a reference surface in the same surroundings, written with its unit. */
function reference(n: EquationNumbers, reflectance: number): string | undefined {
	const sun = n.value('irradiance');
	const sky = n.value('skyTemperature');
	const air = n.value('airTemperature');
	const h = n.value('convectionCoefficient');
	if (sun === undefined || sky === undefined || air === undefined || h === undefined) return undefined;
	const kelvin = solveBalance((1 - reflectance) * sun, referenceEmittance, sky, air, h);
	return texWithUnit(texNumber(kelvin, 1), 'K');
}

export const equations: readonly Equation[] = [
	{
		id: 'balance',
		title: 'Balance of the surface, solved for its temperature',
		tex: '(1 - R)\\,S = \\varepsilon\\,\\sigma\\,(T_\\mathrm{s}^4 - T_\\mathrm{sky}^4) + h_\\mathrm{c}\\,(T_\\mathrm{s} - T_\\mathrm{air})',
		put: (n) =>
			`(1 - ${n.input('solarReflectance')}) \\times ${n.input('irradiance')} = ${n.input('thermalEmittance')} \\times ${sigma} \\times \\left( T_\\mathrm{s}^4 - (${n.input('skyTemperature')})^4 \\right) + ${n.input('convectionCoefficient')} \\times (T_\\mathrm{s} - ${n.input('airTemperature')}) \\;\\Rightarrow\\; T_\\mathrm{s} = ${n.output('surfaceTemperature')}`,
		spoken:
			'Absorbed sunlight, one minus R times S, equals the emittance times sigma times the difference of the fourth powers of the surface and the sky temperature, plus the convection coefficient times the difference of the surface and the air temperature.',
		citation: 'astm-e1980',
		outputs: ['surfaceTemperature']
	},
	{
		id: 'index',
		title: 'Index between the black and the white reference surface',
		tex: '\\mathrm{SRI} = 100\\,\\frac{T_\\mathrm{b} - T_\\mathrm{s}}{T_\\mathrm{b} - T_\\mathrm{w}}',
		put: (n) => {
			const black = reference(n, blackReflectance);
			const white = reference(n, whiteReflectance);
			if (black === undefined || white === undefined) return undefined;
			return `\\mathrm{SRI} = 100\\,\\frac{${black} - ${n.output('surfaceTemperature')}}{${black} - ${white}} = ${n.output('solarReflectanceIndex')}`;
		},
		spoken:
			'The solar reflectance index is one hundred times the black minus the surface temperature over the black minus the white temperature.',
		citation: 'astm-e1980',
		outputs: ['solarReflectanceIndex']
	},
	{
		id: 'fitted',
		title: 'Fitted form of the standard, for its own sunlight, air and sky',
		tex: '\\chi = \\frac{(1 - R - 0.029\\,\\varepsilon)(8.797 + h_\\mathrm{c})}{9.5205\\,\\varepsilon + h_\\mathrm{c}}, \\quad \\mathrm{SRI}_\\mathrm{fit} = 123.97 - 141.35\\,\\chi + 9.655\\,\\chi^2',
		put: (n) => `\\mathrm{SRI}_\\mathrm{fit} = ${n.output('approximateIndex')}`,
		spoken:
			'The fitted index is 123.97 minus 141.35 chi plus 9.655 chi squared, where chi combines absorptance, emittance and the convection coefficient.',
		citation: 'astm-e1980',
		outputs: ['approximateIndex']
	}
];
