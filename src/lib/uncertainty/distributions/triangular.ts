import { exactly } from './exact';
import {
	below,
	number,
	rangeFault,
	type DistributionFamily,
	type ParameterFault,
	type Parameters
} from './types';

function fault(parameters: Parameters, value: number): ParameterFault | undefined {
	if ('halfWidth' in parameters) return below(parameters, 'halfWidth', 0);
	const mode = number(parameters, 'mode');
	if (mode < number(parameters, 'low') || mode > number(parameters, 'high')) {
		return { parameter: 'mode', message: 'must lie between low and high' };
	}
	return rangeFault(parameters, value);
}

/** Density that rises to the mode and falls again in straight lines (JCGM 101:2008, 6.4.5 for the symmetric one). */
export const triangular: DistributionFamily = {
	type: 'triangular',
	ways: [['halfWidth'], ['low', 'mode', 'high']],
	fault,
	build(parameters, value) {
		const half = number(parameters, 'halfWidth');
		const symmetric = 'halfWidth' in parameters;
		const low = symmetric ? value - half : number(parameters, 'low');
		const mode = symmetric ? value : number(parameters, 'mode');
		const high = symmetric ? value + half : number(parameters, 'high');
		const width = high - low;
		if (width === 0) return exactly(value);
		const rise = mode - low;
		const fall = high - mode;
		const turn = rise / width;
		const quantile = (p: number) =>
			p < turn ? low + Math.sqrt(p * width * rise) : high - Math.sqrt((1 - p) * width * fall);
		return {
			standardUncertainty: Math.sqrt((rise * rise + rise * fall + fall * fall) / 18),
			low,
			high,
			quantile,
			fill(stream, out, n) {
				stream.fillUniform(out, n, 0, 1);
				for (let i = 0; i < n; i++) out[i] = quantile(out[i] as number);
			}
		};
	}
};
