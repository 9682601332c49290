import type { Caution } from '../../calculation/types';
import type { CautionContext, Method } from '../types';
import { equations } from './equations';
import { figures } from './figures';
import { inputs } from './inputs';
import { outputs } from './outputs';
import { families } from './series';
import { evaluate } from './solve';

const source = 'ASTM E1980-11';

/** The fitted form was made for the standard's conditions and, by the standard, not for poorly emitting dark ones. */
function fittedFormOutside({ setting }: CautionContext): Caution[] {
	const value = (id: string) => setting.values[id] ?? NaN;
	const absorptance = 1 - value('solarReflectance');
	const reasons: string[] = [];
	const differs = (id: string, standard: number) => Math.abs(value(id) - standard) > 1e-9 * standard;
	if (differs('irradiance', 1000) || differs('airTemperature', 310) || differs('skyTemperature', 300)) {
		reasons.push('it was fitted at 1000 W m⁻², 310 K air and 300 K sky');
	}
	if (absorptance <= 0.1 || (absorptance > 0.8 && value('thermalEmittance') < 0.2)) {
		reasons.push('the standard states its error for other reflectances and emittances only');
	}
	if (reasons.length === 0) return [];
	return [
		{
			code: 'outside-validity',
			level: 'caution',
			text: `The fitted form of the index does not hold here: ${reasons.join('; ')}. Use the index from the solved balance.`,
			figures: {
				absorptance,
				thermalEmittance: value('thermalEmittance'),
				irradiance: value('irradiance'),
				airTemperature: value('airTemperature'),
				skyTemperature: value('skyTemperature')
			},
			source,
			outputs: ['approximateIndex']
		}
	];
}

export const solarReflectanceIndex: Method = {
	id: 'solar-reflectance-index',
	version: '1.0.0',
	title: 'Solar reflectance index',
	answers:
		'How cool a roof or paving stays in the Sun, between a standard black and a standard white surface.',
	averages:
		'It describes one flat, insulated surface under the Sun of the standard, at one moment; it is no forecast for a place or a day. The constants are those of the standard, among them 5.66961 × 10⁻⁸ W m⁻² K⁻⁴.',
	leavesOut: [
		'Heat conducted into the roof or the ground: the surface is taken as insulated behind.',
		'Storage of heat, rain, dew, shade and the slope of the surface.',
		'Ageing and dirt, unless the reflectance was measured on an aged surface.'
	],
	groups: [
		{ id: 'surface', title: 'Surface' },
		{ id: 'surroundings', title: 'Sun, air and wind' }
	],
	inputs,
	alternatives: [],
	options: [],
	outputs,
	equations,
	citations: [
		{
			id: 'astm-e1980',
			text: 'ASTM International (2011): ASTM E1980-11, Standard Practice for Calculating Solar Reflectance Index of Horizontal and Low-Sloped Opaque Surfaces. West Conshohocken, PA.',
			doi: '10.1520/E1980-11'
		}
	],
	figures,
	prepare: () => ({
		columns: inputs.map(({ id }) => id),
		outputs,
		evaluate,
		series: families()
	}),
	cautions: fittedFormOutside,
	history: [{ version: '1.0.0', date: '2026-12-01', change: 'First version.' }]
};
