import type { AssumptionDraft, CalculationDraft } from '$lib/calculation/draft';
import { numberInputs } from '$lib/calculation/new-draft';
import { spreadOf } from '$lib/calculation/spreads';
import type { Method, NumberInput } from '$lib/methods/types';
import { attachUnit, formatSignificant } from '$lib/quantities';
import { parseNumber } from '$lib/quantities/parse-number';
import { defaultSourceText } from '$lib/wording/default-source';
import { areaWords, periodWords, temperatureKindWords } from '$lib/wording/averages';

export interface CheckRow {
	label: string;
	/** As it was understood, not as it was typed. */
	value: string;
	detail?: string;
	warning?: string;
	href: string;
}

function understood(text: string, unit: string): string {
	const parsed = parseNumber(text);
	return parsed.ok ? attachUnit(formatSignificant(parsed.value, 12), unit) : `“${text}” (cannot be read)`;
}

function spreadWords(assumption: AssumptionDraft): string {
	const spread = spreadOf(assumption.spread);
	if (spread.kind === 'exact') return 'taken as exact';
	const parameters = spread.parameters
		.map(({ id, label, measure, list }) => {
			const typed = assumption.spreadValues[id] ?? '';
			const unit = measure === 'number' ? '' : assumption.unit;
			return `${label.toLowerCase()} ${list === true || typed === '' ? typed || '?' : understood(typed, unit)}`;
		})
		.join(', ');
	return `${spread.label}${parameters === '' ? '' : `: ${parameters}`}`;
}

const asLabel = (name: string): string => name.charAt(0).toUpperCase() + name.slice(1);

function sourceWords(
	method: Method,
	assumption: AssumptionDraft,
	evidence: readonly { id: string; fileName: string }[]
): string {
	const { kind, text, evidenceId } = assumption.source;
	const file = evidence.find(({ id }) => id === evidenceId)?.fileName;
	switch (kind) {
		case 'default':
			return defaultSourceText(method, text);
		case 'citation':
			return text;
		case 'file':
			return [file ?? 'a file that is no longer there', text].filter(Boolean).join(', ');
		case 'judgement':
			return `judgement: ${text}`;
		case 'not-sure':
			return 'source not sure';
		case null:
			return '';
	}
}

function assumptionRow(
	method: Method,
	input: NumberInput,
	assumption: AssumptionDraft | undefined,
	href: string,
	evidence: readonly { id: string; fileName: string }[]
): CheckRow {
	const label = asLabel(input.name);
	if (assumption === undefined || assumption.value.trim() === '') {
		return { label, value: input.optional === true ? 'not given (optional)' : 'not given', href };
	}
	const source = sourceWords(method, assumption, evidence);
	return {
		label,
		value: understood(assumption.value, assumption.unit),
		detail: [spreadWords(assumption), source].filter(Boolean).join('; '),
		...(assumption.source.kind === null
			? { warning: 'no source yet' }
			: assumption.source.kind === 'not-sure'
				? { warning: 'source not settled; a report needs it' }
				: {}),
		href
	};
}

/** Every answer of the form as a line: what was understood, its source, and the way back to it. */
export function checkRows(
	id: string,
	draft: CalculationDraft,
	method: Method,
	evidence: readonly { id: string; fileName: string }[]
): CheckRow[] {
	const base = `/calculations/${id}`;
	const rows: CheckRow[] = [
		{ label: 'Method', value: method.title, detail: method.averages, href: `${base}/method` }
	];
	for (const option of method.options) {
		const value = draft.options[option.id] ?? String(option.default);
		const choice = option.choices?.find((known) => known.value === value);
		rows.push({
			label: asLabel(option.name),
			value: choice?.label ?? value,
			href: `${base}/inputs/${option.group}#opt.${option.id}`
		});
	}
	for (const input of numberInputs(method)) {
		rows.push(
			assumptionRow(
				method,
				input,
				draft.assumptions[input.id],
				`${base}/inputs/${input.group}#in.${input.id}.value`,
				evidence
			)
		);
	}
	const output = (wanted: string) => method.outputs.find((known) => known.id === wanted)?.label ?? wanted;
	if (draft.claim !== null) {
		const { claim } = draft;
		rows.push({
			label: 'Claim',
			value: `${understood(claim.value, claim.unit)}, beside: ${output(claim.output)}`,
			detail: [
				areaWords[claim.area],
				periodWords[claim.period],
				method.outputs.find((known) => known.id === claim.output)?.temperatureKind
					? temperatureKindWords[claim.temperatureKind]
					: '',
				claim.citation
			]
				.filter(Boolean)
				.join('; '),
			href: `${base}/compare`
		});
	}
	if (draft.limit !== null) {
		const { limit } = draft;
		rows.push({
			label: 'Limit',
			value: `${output(limit.output)}: ${limit.sense === 'at-most' ? 'at most' : 'at least'} ${understood(limit.value, limit.unit)}`,
			detail: [
				limit.rule === 'guard-band' ? `guard band, risk ${limit.risk} %` : 'simple acceptance',
				limit.source
			]
				.filter(Boolean)
				.join('; '),
			...(limit.source.trim() === '' ? { warning: 'no source yet' } : {}),
			href: `${base}/compare`
		});
	}
	const { evaluation } = draft;
	rows.push({
		label: 'Uncertainty',
		value:
			evaluation.propagation === 'monte-carlo'
				? `Monte Carlo, ${understood(evaluation.trials, '')} trials`
				: 'first order',
		detail: `${understood(evaluation.coverage, '%')} interval, ${evaluation.interval === 'symmetric' ? 'equal tails' : 'shortest'}${
			draft.correlations.length === 0
				? '; assumptions taken as independent'
				: `; ${draft.correlations.length} correlated pairs`
		}`,
		href: `${base}/evaluation`
	});
	return rows;
}
