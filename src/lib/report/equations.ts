/** Equations with the numbers put in: the best estimates in the method's own units, so that each line holds as printed. */
import type { ComputeResult } from '../calculation/types';
import type { EquationNumbers, Method } from '../methods/types';
import { texNumber, texSignificant, texWithUnit } from '../quantities';
import { printedDecimals } from '../wording';
import type { EquationRow } from './model';

/** Writes inputs and outputs of a result as TeX, the outputs at the best estimates. */
export function equationNumbers(result: ComputeResult): EquationNumbers {
	return {
		input(id) {
			const used = result.inputs[id];
			if (!used || Array.isArray(used) || typeof used.value !== 'number') return '';
			return texWithUnit(texSignificant(used.value), used.unit);
		},
		output(id) {
			const output = result.outputs[id];
			if (!output) return '';
			const decimals = printedDecimals(output.standardUncertainty);
			const number =
				decimals === undefined
					? texSignificant(output.value)
					: texNumber(output.value, Math.max(decimals, 0));
			return texWithUnit(number, output.unit);
		},
		value(id) {
			const used = result.inputs[id];
			return used && !Array.isArray(used) && typeof used.value === 'number' ? used.value : undefined;
		}
	};
}

/** Equations that lead to an output of this result, or stand behind all of them. */
export function equationRows(method: Method, result: ComputeResult): EquationRow[] {
	const numbers = equationNumbers(result);
	return method.equations
		.filter(
			(equation) =>
				equation.outputs.length === 0 || equation.outputs.some((id) => result.outputs[id] !== undefined)
		)
		.map((equation) => ({
			id: equation.id,
			title: equation.title,
			tex: equation.tex,
			put: equation.put(numbers) ?? null,
			spoken: equation.spoken,
			citation: equation.citation
		}));
}
