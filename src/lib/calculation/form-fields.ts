import type { Method, NumberInput } from '../methods/types';
import type { AssumptionDraft, CalculationDraft, SourceKind } from './draft';
import { newAssumption, numberInputs } from './new-draft';
import { spreadOf, spreads } from './spreads';

/* Names of the form's fields, and the way back from a submitted form to the draft (also without script). */

export const assumptionField = (input: string, part: string): string => `in.${input}.${part}`;
export const parameterField = (input: string, parameter: string): string => `in.${input}.p.${parameter}`;
export const optionField = (option: string): string => `opt.${option}`;

type Form = Pick<FormData, 'get' | 'has' | 'getAll'>;

function text(form: Form, name: string): string | undefined {
	const value = form.get(name);
	return typeof value === 'string' ? value.replace(/\r\n/g, '\n') : undefined;
}

const sourceKinds: readonly SourceKind[] = ['default', 'citation', 'file', 'judgement', 'not-sure'];

/** True where an assumption is exactly the method's default, so that the request may leave it out. */
export function isUntouchedDefault(input: NumberInput, assumption: AssumptionDraft): boolean {
	return (
		input.default !== undefined &&
		assumption.value.trim() === String(input.default.value) &&
		assumption.unit === input.unit &&
		assumption.spread === 'exact'
	);
}

/**
 * An assumption whose value was changed no longer has the default's source; one set back to the default has it again.
 * @returns the same object where nothing was to be settled
 */
export function settleSource(input: NumberInput, assumption: AssumptionDraft): AssumptionDraft {
	const isDefault =
		input.default !== undefined &&
		assumption.value.trim() === String(input.default.value) &&
		assumption.unit === input.unit;
	if (assumption.source.kind === 'default' && !isDefault) {
		return { ...assumption, source: { kind: null, text: '', evidenceId: null } };
	}
	if (assumption.source.kind === null && isDefault) {
		return { ...assumption, source: newAssumption(input).source };
	}
	const words = newAssumption(input).source.text;
	if (assumption.source.kind === 'default' && assumption.source.text !== words) {
		return { ...assumption, source: { ...assumption.source, text: words } };
	}
	return assumption;
}

/**
 * A draft in which only the method's own values, in the method's own words, are called its defaults: what a browser
 * sends may say otherwise, and a report would print it.
 */
export function settleSources(draft: CalculationDraft, method: Method): CalculationDraft {
	const assumptions = { ...draft.assumptions };
	for (const input of numberInputs(method)) {
		const assumption = assumptions[input.id];
		if (assumption !== undefined) assumptions[input.id] = settleSource(input, assumption);
	}
	return { ...draft, assumptions };
}

function readAssumption(form: Form, input: NumberInput, before: AssumptionDraft): AssumptionDraft {
	const field = (part: string) => text(form, assumptionField(input.id, part));
	const spread = spreads.find((known) => known.kind === field('spread'))?.kind ?? before.spread;
	const spreadValues: Record<string, string> = {};
	for (const parameter of spreadOf(spread).parameters) {
		const typed = text(form, parameterField(input.id, parameter.id)) ?? before.spreadValues[parameter.id];
		if (typed !== undefined) spreadValues[parameter.id] = typed;
	}
	const kind =
		sourceKinds.find((known) => known === field('source')) ??
		(form.has(assumptionField(input.id, 'source')) ? null : before.source.kind);
	const evidenceId = field('evidence');
	const valueKind = field('valueKind');
	const spreadMeans = field('spreadMeans');
	return settleSource(input, {
		value: field('value') ?? before.value,
		unit: input.units.find((unit) => unit === field('unit')) ?? before.unit,
		spread,
		spreadValues,
		source: {
			kind,
			text:
				kind === 'default' ? newAssumption(input).source.text : (field('sourceText') ?? before.source.text),
			evidenceId: evidenceId === undefined ? before.source.evidenceId : evidenceId === '' ? null : evidenceId,
			...(valueKind === 'new' || valueKind === 'aged' ? { valueKind } : {}),
			...(spreadMeans === 'standard-uncertainty' || spreadMeans === 'tolerance' ? { spreadMeans } : {})
		},
		note: field('note') ?? before.note
	});
}

/** The draft with one section's fields as submitted; everything else stays. */
export function readGroup(
	draft: CalculationDraft,
	method: Method,
	group: string,
	form: Form
): CalculationDraft {
	const assumptions = { ...draft.assumptions };
	for (const input of numberInputs(method)) {
		if (input.group !== group) continue;
		assumptions[input.id] = readAssumption(form, input, assumptions[input.id] ?? newAssumption(input));
	}
	const options = { ...draft.options };
	for (const option of method.options) {
		const typed = text(form, optionField(option.id));
		if (option.group === group && typed !== undefined) options[option.id] = typed;
	}
	const visited = draft.visited.includes(group) ? draft.visited : [...draft.visited, group];
	return { ...draft, assumptions, options, visited };
}

function oneOf<T extends string>(allowed: readonly T[], value: string | undefined, otherwise: T): T {
	return allowed.find((known) => known === value) ?? otherwise;
}

/** The draft with the claim's or the limit's fields as submitted. */
export function readComparison(draft: CalculationDraft, method: Method, form: Form): CalculationDraft {
	const outputs = method.outputs.map((output) => output.id);
	const field = (prefix: string, part: string, before: string) => text(form, `${prefix}.${part}`) ?? before;
	const { claim, limit } = draft;
	return {
		...draft,
		claim:
			claim === null
				? null
				: {
						value: field('claim', 'value', claim.value),
						unit: field('claim', 'unit', claim.unit),
						standardUncertainty: field('claim', 'standardUncertainty', claim.standardUncertainty),
						output: oneOf(outputs, text(form, 'claim.output'), claim.output),
						area: oneOf(
							['point', 'sunlit-hemisphere', 'whole-sphere', 'site', 'not-stated'],
							text(form, 'claim.area'),
							claim.area
						),
						period: oneOf(
							['instant', 'day', 'year', 'orbit', 'not-stated'],
							text(form, 'claim.period'),
							claim.period
						),
						temperatureKind: oneOf(
							['effective', 'equilibrium', 'skin', 'radiometric', 'air-2m', 'not-stated'],
							text(form, 'claim.temperatureKind'),
							claim.temperatureKind
						),
						decimals: field('claim', 'decimals', claim.decimals),
						quotation: field('claim', 'quotation', claim.quotation),
						citation: field('claim', 'citation', claim.citation)
					},
		limit:
			limit === null
				? null
				: {
						value: field('limit', 'value', limit.value),
						unit: field('limit', 'unit', limit.unit),
						output: oneOf(outputs, text(form, 'limit.output'), limit.output),
						sense: oneOf(['at-most', 'at-least'], text(form, 'limit.sense'), limit.sense),
						rule: oneOf(['simple-acceptance', 'guard-band'], text(form, 'limit.rule'), limit.rule),
						risk: field('limit', 'risk', limit.risk),
						source: field('limit', 'source', limit.source)
					},
		visited: draft.visited.includes('compare') ? draft.visited : [...draft.visited, 'compare']
	};
}

/** The draft with the section "How to compute" as submitted: evaluation and correlations. */
export function readEvaluation(draft: CalculationDraft, form: Form): CalculationDraft {
	const before = draft.evaluation;
	const a = form.getAll('corr.a').map(String);
	const b = form.getAll('corr.b').map(String);
	const coefficient = form.getAll('corr.coefficient').map(String);
	return {
		...draft,
		evaluation: {
			propagation: oneOf(['monte-carlo', 'first-order'], text(form, 'ev.propagation'), before.propagation),
			trials: text(form, 'ev.trials') ?? before.trials,
			seed: text(form, 'ev.seed') ?? before.seed,
			coverage: text(form, 'ev.coverage') ?? before.coverage,
			interval: oneOf(['symmetric', 'shortest'], text(form, 'ev.interval'), before.interval)
		},
		correlations: a
			.map((first, i) => ({ a: first, b: b[i] ?? '', coefficient: coefficient[i] ?? '' }))
			.filter((pair) => pair.a !== '' && pair.b !== ''),
		temperatureUnit: oneOf(['K', 'degC', 'degF'], text(form, 'ev.temperatureUnit'), draft.temperatureUnit),
		visited: draft.visited.includes('evaluation') ? draft.visited : [...draft.visited, 'evaluation']
	};
}
