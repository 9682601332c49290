import type { OutputResult } from '../calculation/types';
import { methodById } from '../methods';
import type { OutputSpec } from '../methods/types';
import { presentOutput } from './present';
import type { TemperatureScale } from './temperature';

/** What a list knows of a finished run. */
export interface RunOutcome {
	/** Method id. */
	method: string;
	outputs: Record<string, OutputResult>;
	/** The output that a claim or a limit is about; null where a value was asked for. */
	compared: string | null;
	/** Scale that the author chose for temperatures; null in drafts that do not say. */
	scale: TemperatureScale | null;
}

/** A symbol that is a word of its own, such as `\mathrm{SRI}`, tells what a number without a unit is. */
function word({ symbol, unit }: OutputSpec): string {
	const name = unit === '' ? /^\\mathrm\{([A-Za-z]{2,})\}$/.exec(symbol)?.[1] : undefined;
	return name === undefined ? '' : `${name} `;
}

/**
 * The answer of a run in a few figures, for a list: "SRI 36.0 ± 1.2", "308.9 ± 1.9 K", "−24.2 °C ± 0.8 K". What
 * follows the sign is the standard uncertainty, and the list's header says so.
 * @returns undefined where this version knows no such method or the run gave nothing.
 */
export function answerInBrief(outcome: RunOutcome): string | undefined {
	const specs = methodById(outcome.method)?.outputs ?? [];
	const given = specs.filter(({ id }) => outcome.outputs[id] !== undefined);
	const spec =
		given.find(({ id }) => id === outcome.compared) ?? given.find(({ primary }) => primary) ?? given[0];
	const output = spec && outcome.outputs[spec.id];
	if (spec === undefined || output === undefined) return undefined;
	const { estimate, number, unit, uncertainty } = presentOutput(output, spec, outcome.scale ?? 'degC');
	if (uncertainty === undefined) return word(spec) + estimate;
	const sameUnit = unit !== '' && uncertainty.endsWith(unit);
	return `${word(spec)}${sameUnit || unit === '' ? number : estimate} ± ${uncertainty}`;
}

/** A method's title, or its id where this version does not know it. */
export function methodTitle(id: string): string {
	return methodById(id)?.title ?? id;
}
