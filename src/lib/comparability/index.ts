import type { Caution, CautionLevel } from '../calculation/types';
import { aboveAirlessBound } from './above-airless-bound';
import { areaMismatch } from './area-mismatch';
import { belowNoStorageBound } from './below-no-storage-bound';
import type { Rule, RuleContext } from './context';
import { correlationIgnored } from './correlation-ignored';
import { differenceUnresolved } from './difference-unresolved';
import { digitsBeyondUncertainty } from './digits-beyond-uncertainty';
import { effectiveReadAsMean } from './effective-read-as-mean';
import { emissivityAssumedOne } from './emissivity-assumed-one';
import { heavyTails } from './heavy-tails';
import { hotSurface } from './hot-surface';
import { irradianceSuperseded } from './irradiance-superseded';
import { linearPropagationDoubtful } from './linear-propagation-doubtful';
import { nightSideUnsupplied } from './night-side-unsupplied';
import { notConverged } from './not-converged';
import { outsideValidity } from './outside-validity';
import { periodMismatch } from './period-mismatch';
import { temperatureKindMismatch } from './temperature-kind-mismatch';

/** Every rule. A new one is a file and a line here. */
const rules: readonly Rule[] = [
	areaMismatch,
	periodMismatch,
	temperatureKindMismatch,
	effectiveReadAsMean,
	aboveAirlessBound,
	belowNoStorageBound,
	nightSideUnsupplied,
	hotSurface,
	outsideValidity,
	differenceUnresolved,
	linearPropagationDoubtful,
	notConverged,
	heavyTails,
	emissivityAssumedOne,
	irradianceSuperseded,
	digitsBeyondUncertainty,
	correlationIgnored
];

const weight: Record<CautionLevel, number> = { stop: 0, caution: 1, note: 2 };

/** The cautions that a result carries, the gravest first. */
export function cautionsFor(context: RuleContext): Caution[] {
	const { model } = context.checked;
	const uncertainty = new Map(
		model.columns.map(({ id, distribution }) => [id, distribution.standardUncertainty])
	);
	const own = model.method.cautions({
		setting: model.setting,
		inputUncertainty: (id) => uncertainty.get(id) ?? 0,
		outputs: context.outputs
	});
	const all = [...rules.flatMap((rule) => rule(context)), ...own];
	// A stable sort: within a level the order of the rules stays.
	return all.sort((a, b) => weight[a.level] - weight[b.level]);
}
