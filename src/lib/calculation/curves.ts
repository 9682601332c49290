import type { Columns, CurveFamily } from '../methods/types';
import { Sampler } from '../uncertainty/sampler';
import { bestEstimates, type TrialModel } from '../uncertainty/trial-model';
import { selectRank } from '../uncertainty/select-rank';
import type { CompiledModel } from './model';
import type { Series } from './types';

/** Trials behind a band: the first ones of the run, the same at every abscissa. A band is for the eye. */
const bandTrials = 500;

/** Every curve of the method at the best estimates, with its coverage band where trials were propagated. */
export function drawSeries(
	model: CompiledModel,
	trials: TrialModel,
	band: { seed: string; coverage: number } | undefined
): Record<string, Series> {
	// Copied: a linked input's column is a buffer that the next evaluation fills again.
	const single = Object.fromEntries(
		Object.entries(model.local(bestEstimates(trials), 1)).map(([id, column]) => [id, column.slice(0, 1)])
	);
	const drawn = band === undefined ? undefined : draw(model, trials, band.seed);
	const series: Record<string, Series> = {};
	for (const [key, family] of Object.entries(model.prepared.series)) {
		series[key] = drawFamily(family, single, family.banded ? drawn : undefined, band?.coverage ?? 0);
	}
	return series;
}

function draw(model: CompiledModel, trials: TrialModel, seed: string): Columns {
	const sampler = new Sampler(trials, seed);
	sampler.draw(0, bandTrials);
	return model.local(sampler.columns, bandTrials);
}

function drawFamily(
	family: CurveFamily,
	single: Columns,
	drawn: Columns | undefined,
	coverage: number
): Series {
	const ids = family.curves.map(({ id }) => id);
	const one = Object.fromEntries(ids.map((id) => [id, new Float64Array(1)]));
	const many = Object.fromEntries(ids.map((id) => [id, new Float64Array(bandTrials)]));
	const below = Math.max(0, Math.round((bandTrials * (1 - coverage)) / 2) - 1);
	const curves = family.curves.map((curve) => ({
		...curve,
		values: [] as number[],
		...(drawn === undefined ? {} : { low: [] as number[], high: [] as number[] })
	}));
	for (let index = 0; index < family.x.values.length; index++) {
		family.evaluate(index, single, 1, one);
		if (drawn !== undefined) family.evaluate(index, drawn, bandTrials, many);
		for (const curve of curves) {
			curve.values.push((one[curve.id] as Float64Array)[0] as number);
			const values = many[curve.id] as Float64Array;
			curve.low?.push(selectRank(values, below));
			curve.high?.push(selectRank(values, bandTrials - 1 - below));
		}
	}
	return { x: { ...family.x, values: [...family.x.values] }, curves };
}
