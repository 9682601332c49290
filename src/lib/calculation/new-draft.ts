import type { Method, NumberInput, OutputSpec } from '../methods/types';
import type { AssumptionDraft, CalculationDraft, ClaimDraft, LimitDraft, QuestionKind } from './draft';

/** The number inputs of a method, in its order. */
export function numberInputs(method: Method): NumberInput[] {
	return method.inputs.filter((input): input is NumberInput => input.kind === 'number');
}

/** The output that answers the question most directly. */
export function primaryOutput(method: Method): OutputSpec {
	const found = method.outputs.find((output) => output.primary === true) ?? method.outputs[0];
	if (found === undefined) throw new Error(`The method ${method.id} gives no output.`);
	return found;
}

/** An assumption as it stands before anybody has typed: the method's default with its source, or empty. */
export function newAssumption(input: NumberInput): AssumptionDraft {
	const given = input.default;
	return {
		value: given === undefined ? '' : String(given.value),
		unit: input.unit,
		spread: 'exact',
		spreadValues: {},
		source: {
			kind: given === undefined ? null : 'default',
			text: given === undefined ? '' : given.source,
			evidenceId: null
		},
		note: ''
	};
}

export function newDraft(kind: QuestionKind): CalculationDraft {
	return {
		kind,
		method: null,
		assumptions: {},
		options: {},
		correlations: [],
		evaluation: {
			propagation: 'monte-carlo',
			trials: '200000',
			seed: 'noonmark',
			coverage: '95',
			interval: 'symmetric'
		},
		claim: null,
		limit: null,
		temperatureUnit: 'degC',
		visited: []
	};
}

export function newClaim(output: OutputSpec): ClaimDraft {
	return {
		value: '',
		unit: output.unit,
		standardUncertainty: '',
		output: output.id,
		area: 'not-stated',
		period: 'not-stated',
		temperatureKind: 'not-stated',
		decimals: '',
		quotation: '',
		citation: ''
	};
}

export function newLimit(output: OutputSpec): LimitDraft {
	return {
		value: '',
		unit: output.unit,
		output: output.id,
		sense: 'at-most',
		rule: 'simple-acceptance',
		risk: '5',
		source: ''
	};
}

/**
 * The draft with another method: what both methods ask under the same id, and in a unit that both take, is kept.
 */
export function chooseMethod(draft: CalculationDraft, method: Method): CalculationDraft {
	if (draft.method === method.id) return draft;
	const assumptions: Record<string, AssumptionDraft> = {};
	for (const input of numberInputs(method)) {
		const before = draft.assumptions[input.id];
		const kept =
			before !== undefined && input.units.includes(before.unit) && before.source.kind !== 'default';
		assumptions[input.id] = kept ? before : newAssumption(input);
	}
	const options: Record<string, string> = {};
	for (const option of method.options) options[option.id] = String(option.default);
	const output = primaryOutput(method);
	return {
		...draft,
		method: method.id,
		assumptions,
		options,
		correlations: [],
		claim: draft.kind === 'check-claim' ? { ...newClaim(output), ...keptClaim(draft.claim, output) } : null,
		limit: draft.kind === 'test-limit' ? { ...newLimit(output), ...keptLimit(draft.limit, output) } : null,
		visited: []
	};
}

/** The draft asking another kind of question; what was typed for the former kind goes. */
export function chooseKind(
	draft: CalculationDraft,
	kind: QuestionKind,
	method: Method | undefined
): CalculationDraft {
	const output = method === undefined ? undefined : primaryOutput(method);
	return {
		...draft,
		kind,
		claim: kind === 'check-claim' && output !== undefined ? (draft.claim ?? newClaim(output)) : null,
		limit: kind === 'test-limit' && output !== undefined ? (draft.limit ?? newLimit(output)) : null
	};
}

function keptClaim(before: ClaimDraft | null, output: OutputSpec): Partial<ClaimDraft> {
	if (before === null) return {};
	const { quotation, citation, value, decimals, standardUncertainty, area, period, temperatureKind } = before;
	const sameUnit = before.unit === output.unit || output.quantity === 'temperature';
	return {
		quotation,
		citation,
		area,
		period,
		temperatureKind,
		...(sameUnit ? { value, decimals, standardUncertainty, unit: before.unit } : {})
	};
}

function keptLimit(before: LimitDraft | null, output: OutputSpec): Partial<LimitDraft> {
	if (before === null) return {};
	const { sense, rule, risk, source } = before;
	const sameUnit = before.unit === output.unit || output.quantity === 'temperature';
	return { sense, rule, risk, source, ...(sameUnit ? { value: before.value, unit: before.unit } : {}) };
}
