import type { ComputeResult, Period } from '../calculation/types';
import type { Method, OutputSpec } from '../methods/types';

/**
 * The outputs as a result gives them: where a method lets the author say what the irradiance is averaged over, every
 * output averages over the same.
 */
export function outputsOf(
	method: Pick<Method, 'outputs' | 'options'>,
	result: Pick<ComputeResult, 'options'>
): OutputSpec[] {
	const chosen = method.options.some((option) => option.id === 'irradiancePeriod')
		? result.options.irradiancePeriod
		: undefined;
	return method.outputs.map((output) =>
		typeof chosen === 'string' ? { ...output, period: chosen as Period } : output
	);
}
