import type { Method, NumberInput } from '../methods/types';
import { parseNumber, parseNumbers } from '../quantities/parse-number';
import type { AssumptionDraft, CalculationDraft } from './draft';
import { assumptionField, isUntouchedDefault, optionField, parameterField } from './form-fields';
import { numberInputs } from './new-draft';
import type { Problem } from './problem';
import { spreadOf } from './spreads';
import type { Comparison, ComputeRequest, DistributionSpec, InputGiven } from './types';

/** The request that a draft stands for, or what is wrong with it by field id. */
export interface Interpretation {
	request: ComputeRequest | null;
	faults: Record<string, string>;
}

type Faults = Record<string, string>;

function number(text: string, field: string, faults: Faults): number | undefined {
	const parsed = parseNumber(text);
	if (parsed.ok) return parsed.value;
	faults[field] = parsed.reason;
	return undefined;
}

function distribution(
	input: NumberInput,
	assumption: AssumptionDraft,
	faults: Faults
): DistributionSpec | undefined {
	const spread = spreadOf(assumption.spread);
	if (spread.type === 'exact') return undefined;
	if (
		(spread.kind === 'normal' || spread.kind === 'students-t') &&
		assumption.source.spreadMeans === 'tolerance'
	) {
		faults[assumptionField(input.id, 'spread')] =
			`${input.name}: its “±” is said to be a tolerance, but it is entered as a standard uncertainty. Choose “half range, even”, or say that it is a standard uncertainty.`;
		return undefined;
	}
	const parameters: Record<string, number | number[]> = {};
	let complete = true;
	for (const parameter of spread.parameters) {
		const field = parameterField(input.id, parameter.id);
		const typed = assumption.spreadValues[parameter.id] ?? '';
		if (typed.trim() === '') {
			faults[field] = `${input.name}: enter “${parameter.label}”, or choose “exact”.`;
			complete = false;
		} else if (parameter.list === true) {
			const parsed = parseNumbers(typed);
			if (parsed.ok) parameters[parameter.id] = parsed.values;
			else {
				faults[field] = parsed.reason;
				complete = false;
			}
		} else {
			const value = number(typed, field, faults);
			if (value === undefined) complete = false;
			else parameters[parameter.id] = value;
		}
	}
	// The contract's check of the parameters follows in `compute`, with the path of whatever does not fit.
	return complete ? ({ type: spread.type, ...parameters } as DistributionSpec) : undefined;
}

function inputs(draft: CalculationDraft, method: Method, faults: Faults): Record<string, InputGiven> {
	const alternative = new Set(method.alternatives.flatMap((choice) => choice.ways.flat()));
	const given: Record<string, InputGiven> = {};
	for (const input of numberInputs(method)) {
		const assumption = draft.assumptions[input.id];
		const field = assumptionField(input.id, 'value');
		const blank = assumption === undefined || assumption.value.trim() === '';
		if (blank) {
			const needed = input.default === undefined && input.optional !== true && !alternative.has(input.id);
			if (needed) faults[field] = `${input.name}: enter a value.`;
			continue;
		}
		if (isUntouchedDefault(input, assumption)) continue;
		const value = number(assumption.value, field, faults);
		const spread = distribution(input, assumption, faults);
		if (value === undefined) continue;
		given[input.id] = {
			value,
			unit: assumption.unit,
			...(spread === undefined ? {} : { distribution: spread })
		};
	}
	return given;
}

function comparison(draft: CalculationDraft, faults: Faults): Comparison | undefined {
	if (draft.kind === 'check-claim' && draft.claim !== null) {
		const { claim } = draft;
		const value = number(claim.value, 'claim.value', faults);
		const uncertainty =
			claim.standardUncertainty.trim() === ''
				? undefined
				: number(claim.standardUncertainty, 'claim.standardUncertainty', faults);
		const decimals =
			claim.decimals.trim() === '' ? undefined : number(claim.decimals, 'claim.decimals', faults);
		if (decimals !== undefined && !(Number.isInteger(decimals) && decimals >= 0 && decimals <= 12)) {
			faults['claim.decimals'] = 'Decimals: a whole number from 0 to 12.';
		}
		if (value === undefined) return undefined;
		return {
			kind: 'claim',
			value,
			unit: claim.unit,
			output: claim.output,
			area: claim.area,
			period: claim.period,
			temperatureKind: claim.temperatureKind,
			...(uncertainty === undefined ? {} : { standardUncertainty: uncertainty }),
			...(decimals === undefined ? {} : { decimals }),
			...(claim.citation.trim() === '' ? {} : { citation: claim.citation.trim() })
		};
	}
	if (draft.kind === 'test-limit' && draft.limit !== null) {
		const { limit } = draft;
		const value = number(limit.value, 'limit.value', faults);
		let rule: { type: 'simple-acceptance' } | { type: 'guard-band'; risk: number } | undefined = {
			type: 'simple-acceptance'
		};
		if (limit.rule === 'guard-band') {
			const percent = number(limit.risk, 'limit.risk', faults);
			if (percent !== undefined && !(percent > 0 && percent < 50)) {
				faults['limit.risk'] = 'Risk of accepting wrongly: a percentage above 0 and below 50.';
			}
			rule = percent === undefined ? undefined : { type: 'guard-band', risk: percent / 100 };
		}
		if (value === undefined || rule === undefined) return undefined;
		return {
			kind: 'limit',
			value,
			unit: limit.unit,
			output: limit.output,
			sense: limit.sense,
			rule,
			...(limit.source.trim() === '' ? {} : { source: limit.source.trim() })
		};
	}
	return undefined;
}

/**
 * Reads a draft as a compute request.
 * @param draft as typed
 * @param method the draft's method
 * @returns the request, or null with every fault under the id of its field
 */
export function toRequest(draft: CalculationDraft, method: Method): Interpretation {
	const faults: Faults = {};
	const given = inputs(draft, method, faults);
	const trials = number(draft.evaluation.trials, 'ev.trials', faults);
	if (trials !== undefined && !(Number.isInteger(trials) && trials >= 10_000 && trials <= 1e8)) {
		faults['ev.trials'] = 'Trials: a whole number from 10 000 to 100 000 000.';
	}
	const percent = number(draft.evaluation.coverage, 'ev.coverage', faults);
	if (percent !== undefined && !(percent > 0 && percent < 100)) {
		faults['ev.coverage'] = 'Coverage: a percentage above 0 and below 100.';
	}
	const options: Record<string, string | number> = {};
	for (const option of method.options) {
		const typed = draft.options[option.id];
		if (typed === undefined || typed === String(option.default)) continue;
		if (option.choices !== undefined) {
			if (option.choices.some((choice) => choice.value === typed)) options[option.id] = typed;
			else faults[optionField(option.id)] = `${option.name}: choose one of the list.`;
		} else {
			const value = number(typed, optionField(option.id), faults);
			if (value !== undefined) options[option.id] = value;
		}
	}
	const correlations = draft.correlations.flatMap((pair, i) => {
		const coefficient = number(pair.coefficient, `corr.${i}.coefficient`, faults);
		return coefficient === undefined ? [] : [{ a: pair.a, b: pair.b, coefficient }];
	});
	const compareWith = comparison(draft, faults);
	if (Object.keys(faults).length > 0 || trials === undefined || percent === undefined) {
		return { request: null, faults };
	}
	return {
		request: {
			method: method.id,
			inputs: given,
			options,
			...(correlations.length > 0 ? { correlations } : {}),
			evaluation: {
				propagation: draft.evaluation.propagation,
				...(draft.evaluation.propagation === 'monte-carlo'
					? { trials, seed: draft.evaluation.seed === '' ? 'noonmark' : draft.evaluation.seed }
					: {}),
				// Divided, not multiplied by 0.01, so that 95 gives the double nearest to 0.95.
				coverage: percent / 100,
				interval: draft.evaluation.interval
			},
			...(compareWith === undefined ? {} : { compareWith })
		},
		faults
	};
}

/** The form field that a problem of the engine belongs to; `form` where it belongs to none. */
export function fieldOfProblem(problem: Problem): string {
	const [, area, id, part, detail] = problem.path.split('/');
	if (area === 'inputs' && id !== undefined) {
		if (part === 'distribution' && detail !== undefined && detail !== 'type')
			return parameterField(id, detail);
		if (part === 'distribution') return assumptionField(id, 'spread');
		if (part === 'unit') return assumptionField(id, 'unit');
		return assumptionField(id, 'value');
	}
	if (area === 'options' && id !== undefined) return optionField(id);
	if (area === 'evaluation' && id !== undefined) return `ev.${id}`;
	if (area === 'correlations' && id !== undefined) return `corr.${id}.coefficient`;
	return 'form';
}
