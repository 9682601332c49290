import { ProblemError } from '../calculation/problem';
import { coveredTrials, shortestInterval, symmetricInterval, type Ends } from './coverage-interval';
import { decimalsFor } from '../quantities/round';
import { integerPower } from '../exact';
import { Sampler } from './sampler';
import { Tally, TooFewKept, type OrderStatistics, type Pivots, type TallyState } from './tally';
import { blockSize, emptyColumns, evaluateOnce, type TrialModel } from './trial-model';

export interface MonteCarloSettings {
	trials: number | 'adaptive';
	/** Significant digits of the standard uncertainty that adaptive trials must settle. */
	digits: 1 | 2;
	seed: string;
	coverage: number;
	interval: 'symmetric' | 'shortest';
	/** An output and a level of it whose share of trials at or below is asked for. */
	watch?: { output: string; level: number; tailShare: number };
	/** Whether whoever drives the generator can have blocks done elsewhere. */
	delegates?: boolean;
}

/** Blocks from `from` on that other threads may do; the generator is resumed with what they did. */
export interface Delegation {
	from: number;
	blocks: number;
	pivots: Record<string, Pivots>;
}

/** What one thread did of a delegation. */
export interface Share {
	redrawn: number;
	tallies: Record<string, TallyState>;
}

/** A step of a run: the share done, or blocks that others may do. */
export type Step = number | Delegation;

export interface OutputStatistics {
	mean: number;
	standardUncertainty: number;
	interval: Ends;
	/** Equal-tailed interval, whatever kind was asked for. */
	symmetric: Ends;
	order: OrderStatistics;
}

export interface MonteCarloOutcome {
	trials: number;
	redrawn: number;
	converged: boolean;
	outputs: Record<string, OutputStatistics>;
	/** Share of trials at or below the watched level. */
	shareAtOrBelow?: number;
}

/** Trials from whose order statistics the pivots are taken. */
const pilotBlocks = 4;
/** Blocks between two reports of progress: some tens of milliseconds. */
const blocksPerStep = 32;
const mostAdaptiveTrials = 5_000_000;

/**
 * Propagates distributions by trials (JCGM 101:2008, clause 7). A generator: it yields the share done and can be
 * left standing between steps. The outcome depends on the model, the seed and the settings alone.
 */
export function* monteCarlo(
	model: TrialModel,
	settings: MonteCarloSettings
): Generator<Step, MonteCarloOutcome, readonly Share[] | undefined> {
	if (settings.trials === 'adaptive') return yield* adaptive(model, settings);
	// Six standard errors of the pilot's tail share have always sufficed; if not, the run is repeated.
	for (let margin = 6; ; margin *= 4) {
		try {
			return yield* fixed(model, settings, settings.trials, margin);
		} catch (fault) {
			if (!(fault instanceof TooFewKept)) throw fault;
		}
	}
}

class Run {
	readonly tallies: Record<string, Tally> = {};
	readonly out: Record<string, Float64Array>;
	redrawn = 0;
	private readonly sampler: Sampler;

	constructor(
		private readonly model: TrialModel,
		private readonly settings: MonteCarloSettings,
		blocks: number
	) {
		const centre = evaluateOnce(model);
		const { watch } = settings;
		for (const id of model.outputs) {
			this.tallies[id] = new Tally(
				blocks,
				centre[id] as number,
				watch?.output === id ? watch.level : undefined
			);
		}
		this.out = emptyColumns(model.outputs, blockSize);
		this.sampler = new Sampler(model, settings.seed);
	}

	block(index: number, n: number): void {
		this.redrawn += this.sampler.draw(index, n);
		this.model.evaluate(this.sampler.columns, n, this.out);
		for (const id of this.model.outputs) {
			const tally = this.tallies[id] as Tally;
			tally.add(index, this.out[id] as Float64Array, n);
			if (!Number.isFinite(tally.squares[index])) throw notFinite(id);
		}
	}

	take({ redrawn, tallies }: Share): void {
		this.redrawn += redrawn;
		for (const [id, state] of Object.entries(tallies)) this.tallies[id]?.merge(state);
	}

	outcome(trials: number, converged: boolean): MonteCarloOutcome {
		const { coverage, interval, watch } = this.settings;
		const tail = Math.ceil(trials * tailShare(this.settings)) + 2;
		const outputs: Record<string, OutputStatistics> = {};
		for (const id of this.model.outputs) {
			const tally = this.tallies[id] as Tally;
			const order = tally.order(tail);
			const symmetric = symmetricInterval(order, coverage);
			outputs[id] = {
				...tally.moments(),
				symmetric,
				interval: interval === 'symmetric' ? symmetric : shortestInterval(order, coverage),
				order
			};
		}
		if (watch !== undefined && watch.tailShare > 0) {
			// Read now, so that a tail of which too little was kept is found while the run can be repeated.
			const order = outputs[watch.output]?.order;
			order?.at(Math.max(1, Math.ceil(watch.tailShare * trials)));
			order?.at(Math.ceil((1 - watch.tailShare) * trials));
		}
		const outcome: MonteCarloOutcome = { trials, redrawn: this.redrawn, converged, outputs };
		if (watch !== undefined) outcome.shareAtOrBelow = (this.tallies[watch.output]?.atOrBelow ?? 0) / trials;
		return outcome;
	}
}

function notFinite(output: string): ProblemError {
	return new ProblemError(
		'not-finite',
		`Some trials give no finite number for ${output}. Check the values and how widely they are spread.`,
		'/inputs'
	);
}

function* fixed(
	model: TrialModel,
	settings: MonteCarloSettings,
	trials: number,
	margin: number
): Generator<Step, MonteCarloOutcome, readonly Share[] | undefined> {
	const blocks = Math.ceil(trials / blockSize);
	const run = new Run(model, settings, blocks);
	for (let block = 0; block < blocks; block++) {
		run.block(block, Math.min(blockSize, trials - block * blockSize));
		if (block === pilotBlocks - 1 && blocks > pilotBlocks) {
			const pivots = setPivots(run, settings, margin);
			const shares = settings.delegates === true ? yield { from: pilotBlocks, blocks, pivots } : undefined;
			if (shares !== undefined) {
				for (const share of shares) run.take(share);
				break;
			}
		}
		if (block % blocksPerStep === blocksPerStep - 1) yield (block + 1) / blocks;
	}
	// JCGM 101:2008, 7.2.2: at least 10 000 / (1 - p) trials.
	return run.outcome(trials, trials * (1 - settings.coverage) >= 9999.999);
}

/** Share of the trials at each end that the asked interval and the watched tail are read from. */
function tailShare({ coverage, interval, watch }: MonteCarloSettings): number {
	return Math.max(interval === 'shortest' ? 1 - coverage : (1 - coverage) / 2, watch?.tailShare ?? 0);
}

/** Sets the bounds outside which values are kept, from the order statistics of the first blocks. */
function setPivots(run: Run, settings: MonteCarloSettings, margin: number): Record<string, Pivots> {
	const pilot = pilotBlocks * blockSize;
	const share = tailShare(settings);
	const rank = Math.ceil(pilot * (share + margin * Math.sqrt((share * (1 - share)) / pilot))) + 2;
	const pivots: Record<string, Pivots> = {};
	if (rank >= pilot / 2) return pivots;
	for (const [id, tally] of Object.entries(run.tallies)) {
		const order = tally.order(rank);
		pivots[id] = { low: order.at(rank), high: order.at(pilot + 1 - rank) };
		tally.keepOutside(pivots[id]);
	}
	return pivots;
}

/** Every `stride`-th block of a delegation, from its `first` on: one thread's part. */
export function runShare(
	model: TrialModel,
	settings: MonteCarloSettings,
	trials: number,
	{ from, blocks, pivots }: Delegation,
	first: number,
	stride: number
): Share {
	const run = new Run(model, settings, blocks);
	for (const [id, pivot] of Object.entries(pivots)) run.tallies[id]?.keepOutside(pivot);
	for (let block = from + first; block < blocks; block += stride) {
		run.block(block, Math.min(blockSize, trials - block * blockSize));
	}
	return {
		redrawn: run.redrawn,
		tallies: Object.fromEntries(Object.entries(run.tallies).map(([id, tally]) => [id, tally.state()]))
	};
}

interface Batch {
	mean: number;
	standardUncertainty: number;
	low: number;
	high: number;
}

/** JCGM 101:2008, 7.9: batches until twice the standard deviation of each averaged figure is below the tolerance. */
function* adaptive(
	model: TrialModel,
	settings: MonteCarloSettings
): Generator<Step, MonteCarloOutcome, readonly Share[] | undefined> {
	const { coverage, interval, digits } = settings;
	const perBatch = Math.ceil(Math.max(100 / (1 - coverage), 10_000) / blockSize);
	const batchTrials = perBatch * blockSize;
	const mostBatches = Math.max(2, Math.floor(mostAdaptiveTrials / batchTrials));
	const run = new Run(model, settings, perBatch * mostBatches);
	const batches: Record<string, Batch[]> = Object.fromEntries(model.outputs.map((id) => [id, []]));
	for (let batch = 0; batch < mostBatches; batch++) {
		const values = emptyColumns(model.outputs, batchTrials);
		for (let k = 0; k < perBatch; k++) {
			run.block(batch * perBatch + k, blockSize);
			for (const id of model.outputs)
				(values[id] as Float64Array).set(run.out[id] as Float64Array, k * blockSize);
		}
		let settled = batch > 0;
		for (const id of model.outputs) {
			const all = batches[id] as Batch[];
			all.push(summary(values[id] as Float64Array, coverage, interval));
			settled = settled && isSettled(all, (run.tallies[id] as Tally).moments().standardUncertainty, digits);
		}
		if (settled) return run.outcome((batch + 1) * batchTrials, true);
		yield (batch + 1) / mostBatches;
	}
	return run.outcome(mostBatches * batchTrials, false);
}

function summary(values: Float64Array, coverage: number, kind: 'symmetric' | 'shortest'): Batch {
	const tally = new Tally(1, values[0] as number, undefined);
	tally.add(0, values, values.length);
	const order = tally.order();
	const ends = kind === 'symmetric' ? symmetricInterval(order, coverage) : shortestInterval(order, coverage);
	return { ...tally.moments(), ...ends };
}

/** Numerical tolerance of JCGM 101:2008, 7.9.2: half a unit of the last significant digit of u. */
export function numericalTolerance(standardUncertainty: number, digits: 1 | 2): number {
	const decimals = decimalsFor(standardUncertainty, digits);
	return decimals === undefined ? 0 : 0.5 * integerPower(10, -decimals);
}

function isSettled(batches: readonly Batch[], standardUncertainty: number, digits: 1 | 2): boolean {
	const tolerance = numericalTolerance(standardUncertainty, digits);
	const h = batches.length;
	for (const key of ['mean', 'standardUncertainty', 'low', 'high'] as const) {
		const average = batches.reduce((sum, batch) => sum + batch[key], 0) / h;
		const squares = batches.reduce((sum, batch) => sum + (batch[key] - average) * (batch[key] - average), 0);
		if (2 * Math.sqrt(squares / (h * (h - 1))) > tolerance) return false;
	}
	return true;
}

/** True if an interval of the coverage can be read off that many trials. */
export function enoughTrials(trials: number, coverage: number): boolean {
	return trials - coveredTrials(trials, coverage) >= 2;
}

/** Runs the generator to its end. */
export function runMonteCarlo(model: TrialModel, settings: MonteCarloSettings): MonteCarloOutcome {
	const steps = monteCarlo(model, settings);
	for (;;) {
		const step = steps.next(undefined);
		if (step.done === true) return step.value;
	}
}
