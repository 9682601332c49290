import type { CalculationDraft } from '../calculation/draft';
import { primaryOutput } from '../calculation/new-draft';
import type { Caution, CautionLevel, ComputeResult } from '../calculation/types';
import type { Method, OutputSpec } from '../methods/types';
import { averagesSentence } from './answer';
import { presentOutput } from './present';

/** The running answer beside the form, as words and printed numbers; plain JSON. */
export interface AnswerView {
	/** What is averaged: "Mean over the sunlit side". */
	label: string;
	/** "An average over the sunlit hemisphere, at one instant." */
	averages: string;
	value?: string;
	/** "standard uncertainty 0.9 K" */
	spread?: string;
	/** "95 % interval 307.1 to 310.8 K" */
	interval?: string;
	others: { label: string; value: string }[];
	/** Share of the uncertainty of the answer by input id, 0 to 1. */
	shares: Record<string, number>;
	/** The gravest caution, if any, and how many there are in all. */
	caution?: Pick<Caution, 'code' | 'level' | 'text'>;
	cautions: number;
	/** Fault by field id; beside a value only those of the claim or the limit. */
	faults: Record<string, string>;
}

const gravity: Readonly<Record<CautionLevel, number>> = { stop: 2, caution: 1, note: 0 };

/** The output that a draft is about: the compared one, or the method's most direct answer. */
export function answeredOutput(draft: CalculationDraft, method: Method): OutputSpec {
	const compared =
		draft.kind === 'check-claim'
			? draft.claim?.output
			: draft.kind === 'test-limit'
				? draft.limit?.output
				: undefined;
	return method.outputs.find(({ id }) => id === compared) ?? primaryOutput(method);
}

export function emptyAnswer(
	draft: CalculationDraft,
	method: Method,
	faults: Record<string, string>
): AnswerView {
	const asked = answeredOutput(draft, method);
	return {
		label: asked.label,
		averages: averagesSentence(asked, { scale: draft.temperatureUnit }),
		others: [],
		shares: {},
		cautions: 0,
		faults
	};
}

/** A computed result as the running answer shows it. */
export function answerView(draft: CalculationDraft, method: Method, result: ComputeResult): AnswerView {
	const asked = answeredOutput(draft, method);
	const scale = draft.temperatureUnit;
	const main = result.outputs[asked.id];
	const beside = method.outputs.filter(({ id }) => id !== asked.id);
	const others = beside.flatMap((output) => {
		const computed = result.outputs[output.id];
		return computed === undefined
			? []
			: [{ label: output.label, value: presentOutput(computed, output, scale).estimate }];
	});
	// Outputs that wait for the same input are one line.
	const waiting = new Map<string, string[]>();
	for (const output of beside) {
		const missing = method.inputs.find(({ id }) => output.needs?.includes(id) === true)?.name;
		if (result.outputs[output.id] !== undefined || missing === undefined) continue;
		waiting.set(missing, [...(waiting.get(missing) ?? []), output.label]);
	}
	for (const [missing, [first = '', ...more]] of waiting) {
		others.push({
			label: more.length === 0 ? first : `${first} and ${more.length} more`,
			value: `needs the ${missing}`
		});
	}
	// That first order is a rough guide matters least beside an interval that does not rest on it.
	const weight = ({ code, level }: Caution) =>
		gravity[level] - (code === 'linear-propagation-doubtful' ? 0.5 : 0);
	const gravest = [...result.cautions].sort((a, b) => weight(b) - weight(a))[0];
	const rest = {
		label: asked.label,
		averages: averagesSentence(asked, { scale }),
		others,
		cautions: result.cautions.length,
		faults: {},
		...(gravest === undefined
			? {}
			: { caution: { code: gravest.code, level: gravest.level, text: gravest.text } })
	};
	if (main === undefined) return { ...rest, shares: {} };
	const shown = presentOutput(main, asked, scale);
	return {
		...rest,
		value: shown.estimate,
		shares: Object.fromEntries(
			Object.entries(main.sensitivity ?? {}).map(([id, entry]) => [id, entry.share])
		),
		...(shown.uncertainty === undefined ? {} : { spread: `standard uncertainty ${shown.uncertainty}` }),
		...(shown.low === undefined || shown.high === undefined
			? {}
			: { interval: `${shown.coverage ?? ''} interval ${shown.low} to ${shown.high}`.trim() })
	};
}
