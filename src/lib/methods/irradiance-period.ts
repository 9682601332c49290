import type { Period } from '../calculation/types';
import type { OptionSpec, OutputSpec } from './types';

/** What the given irradiance is averaged over; every output then averages over the same. */
export function irradiancePeriodOption(standard: Period, group: string): OptionSpec {
	return {
		id: 'irradiancePeriod',
		name: 'averaging period of the irradiance',
		question: 'What time does that sunlight stand for?',
		help: 'The answer averages over the same time. Trade term: averaging period of the irradiance.',
		default: standard,
		choices: [
			{ value: 'instant', label: 'one moment, such as closest approach' },
			{ value: 'day', label: 'the mean over one day' },
			{ value: 'year', label: 'the mean over one year' },
			{ value: 'orbit', label: 'the mean over one orbit, or the mean distance' }
		],
		group
	};
}

/** The outputs with the period that the option gives them. */
export function withPeriod(outputs: readonly OutputSpec[], period: unknown): OutputSpec[] {
	return outputs.map((output) => ({ ...output, period: period as Period }));
}
