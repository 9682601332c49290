import { cautionsFor } from '../comparability';
import { claimFinding } from '../comparability/claim-finding';
import { limitFinding } from '../comparability/limit-finding';
import { loadUnits } from '../quantities';
import { differenceToSi, toSi } from '../quantities/convert';
import { parseUnit } from '../quantities/parse-unit';
import { sealRecord } from '../record/seal';
import { firstOrder, type FirstOrderOutput } from '../uncertainty/first-order';
import {
	monteCarlo,
	runShare,
	type Delegation,
	type MonteCarloOutcome,
	type MonteCarloSettings,
	type Share,
	type Step
} from '../uncertainty/monte-carlo';
import { emptyColumns, type TrialModel } from '../uncertainty/trial-model';
import { checkRequest, requestOf, type CheckedRequest } from './check-request';
import { unitTexts } from './check-unit';
import { drawSeries } from './curves';
import { listOutputs, type Propagated } from './list-outputs';
import { ProblemError } from './problem';
import type { ComputeResult, Finding } from './types';

export interface ComputeOptions {
	onProgress?: (fraction: number) => void;
	/** Called between blocks, so that whoever runs a long request can let others have a turn. */
	pause?: () => Promise<void>;
	signal?: AbortSignal;
	/** Has blocks of trials done by other threads; the result is the same to the last bit without. */
	delegate?: (delegation: Delegation) => Promise<readonly Share[] | undefined>;
}

type Steps<Result> = Generator<Step, Result, readonly Share[] | undefined>;

/** The outputs that are propagated: those asked for, and the one compared, if the inputs determine it. */
function propagatedOutputs({ model, evaluation, comparison }: CheckedRequest): string[] {
	const determined = model.outputs.map(({ id }) => id);
	if (comparison !== undefined && !determined.includes(comparison.output)) {
		throw new ProblemError(
			'undetermined-output',
			`These inputs do not determine ${comparison.output}.`,
			'/compareWith/output'
		);
	}
	const asked = evaluation.outputs;
	return determined.filter((id) => asked === undefined || asked.includes(id) || id === comparison?.output);
}

function trialModel({ model, correlations }: CheckedRequest, outputs: readonly string[]): TrialModel {
	const all = model.outputs.map(({ id }) => id);
	let scratch: Record<string, Float64Array> = {};
	let size = 0;
	return {
		columns: model.columns,
		correlations,
		outputs,
		reject: model.reject,
		evaluate(inputs, n, out) {
			if (size < n) {
				size = n;
				scratch = emptyColumns(
					all.filter((id) => !outputs.includes(id)),
					n
				);
			}
			model.evaluate(inputs, n, { ...scratch, ...out });
		}
	};
}

/** The settings of the trials, with the level of a limit to be watched. */
function trialSettings(checked: CheckedRequest, delegates: boolean): MonteCarloSettings {
	const { evaluation, comparison } = checked;
	const limit = comparison?.kind === 'limit' ? comparison : undefined;
	const output = checked.model.outputs.find(({ id }) => id === limit?.output);
	const unit = output === undefined ? undefined : parseUnit(limit?.unit ?? output.unit);
	if (limit === undefined || output === undefined || unit === undefined) return { ...evaluation, delegates };
	const inSi = output.quantity === 'temperature-difference' ? differenceToSi : toSi;
	const tailShare = limit.rule.type === 'guard-band' ? limit.rule.risk : 0;
	return {
		...evaluation,
		delegates,
		watch: { output: limit.output, level: inSi(limit.value, unit), tailShare }
	};
}

function* propagate(checked: CheckedRequest, trials: TrialModel, delegates: boolean): Steps<Propagated> {
	const { evaluation, model } = checked;
	const propagated: Propagated = { values: bestValues(trials) };
	const uncertain = model.columns.some(({ distribution }) => distribution.standardUncertainty > 0);
	if (evaluation.propagation === 'none') {
		if (uncertain && checked.comparison?.kind === 'limit') {
			throw new ProblemError(
				'uncertainty-needed',
				'Whether a limit is met depends on the uncertainty of the result. Have it propagated, by trials or to first order.',
				'/evaluation/propagation'
			);
		}
		return propagated;
	}
	if (!uncertain) return { ...propagated, exact: true };
	if (evaluation.propagation === 'first-order') {
		propagated.linear = firstOrder(trials, evaluation.coverage);
		// A small run beside it shows whether the linear form may be trusted (JCGM 101:2008, clause 8).
		propagated.check = yield* monteCarlo(trials, { ...evaluation, trials: 20_000 });
		return propagated;
	}
	propagated.linear = linearOrNone(trials, evaluation.coverage);
	propagated.trials = yield* monteCarlo(trials, trialSettings(checked, delegates));
	propagated.check = propagated.trials;
	return propagated;
}

/** One thread's part of the trials of a request; see `Delegation`. */
export function computeShare(input: unknown, delegation: Delegation, first: number, stride: number): Share {
	const checked = checkRequest(requestOf(input));
	const trials = trialModel(checked, propagatedOutputs(checked));
	const { evaluation } = checked;
	if (evaluation.trials === 'adaptive') throw new Error('Adaptive trials are not shared out.');
	return runShare(trials, trialSettings(checked, false), evaluation.trials, delegation, first, stride);
}

function bestValues(trials: TrialModel): Record<string, number> {
	const inputs = Object.fromEntries(trials.columns.map(({ id, value }) => [id, Float64Array.of(value)]));
	const out = emptyColumns(trials.outputs, 1);
	trials.evaluate(inputs, 1, out);
	return Object.fromEntries(
		trials.outputs.map((id) => {
			const value = out[id]?.[0] as number;
			if (!Number.isFinite(value)) {
				throw new ProblemError('not-finite', `These values give no finite number for ${id}.`, '/inputs');
			}
			return [id, value];
		})
	);
}

/** Sensitivities beside a Monte Carlo run; a slope that is not finite leaves them out and stops nothing. */
function linearOrNone(trials: TrialModel, coverage: number): Record<string, FirstOrderOutput> | undefined {
	try {
		return firstOrder(trials, coverage);
	} catch (fault) {
		if (fault instanceof ProblemError && fault.code === 'no-derivative') return undefined;
		throw fault;
	}
}

function listEvaluation(
	{ evaluation }: CheckedRequest,
	outcome: MonteCarloOutcome | undefined
): ComputeResult['evaluation'] {
	const { propagation, seed, coverage, interval } = evaluation;
	if (propagation === 'none') return { propagation };
	if (propagation === 'first-order') return { propagation, coverage };
	// Without any uncertain input every trial gives the same value, and none need be drawn.
	const trials = outcome?.trials ?? (evaluation.trials === 'adaptive' ? 0 : evaluation.trials);
	return {
		propagation,
		trials,
		seed,
		coverage,
		interval,
		redrawn: outcome?.redrawn ?? 0,
		converged: outcome?.converged ?? true
	};
}

/**
 * Computes one request: the same function for the form, the workers, the API, the command and verification. It takes a
 * request or a stored `{request, result}`. A generator: it yields the share done, so that a long run can be
 * interleaved with other work; the result does not depend on how. Units outside the own table must have been loaded
 * (`loadUnits`) before; `compute` does that.
 * @throws ProblemError for any fault of the request
 */
export function* computeInBlocks(input: unknown, delegates = false): Steps<ComputeResult> {
	const checked = checkRequest(requestOf(input));
	const { model, evaluation, comparison, request } = checked;
	const ids = propagatedOutputs(checked);
	const trials = trialModel(checked, ids);
	const propagated = yield* propagate(checked, trials, delegates);
	const outputs = listOutputs(checked, ids, propagated);
	const banded = propagated.trials !== undefined;
	const series = drawSeries(
		model,
		trials,
		banded ? { seed: evaluation.seed, coverage: evaluation.coverage } : undefined
	);
	const context = { checked, outputs, propagated };
	const cautions = cautionsFor(context);
	let finding: Finding | undefined;
	if (comparison?.kind === 'claim') finding = claimFinding(comparison, context, cautions);
	if (comparison?.kind === 'limit') finding = limitFinding(comparison, context);
	const { outputs: asked } = evaluation;
	const result = {
		method: { id: model.method.id, version: model.method.version },
		inputs: model.used,
		options: model.options,
		outputs:
			asked === undefined
				? outputs
				: Object.fromEntries(Object.entries(outputs).filter(([id]) => asked.includes(id))),
		series,
		cautions,
		evaluation: listEvaluation(checked, propagated.trials),
		...(finding === undefined ? {} : { finding })
	};
	if (!isFiniteThroughout(finding)) throw beyondNumbers('the comparison', '/compareWith');
	if (!isFiniteThroughout(result)) throw beyondNumbers('the result', '/inputs');
	return sealRecord(request, result);
}

/** Whether every number in plain data is one that JSON can carry. */
function isFiniteThroughout(value: unknown): boolean {
	if (typeof value === 'number') return Number.isFinite(value);
	if (typeof value !== 'object' || value === null) return true;
	return Object.values(value).every(isFiniteThroughout);
}

function beyondNumbers(what: string, path: string): ProblemError {
	return new ProblemError(
		'not-finite',
		`These values give numbers in ${what} that are too large to compute with.`,
		path
	);
}

/** Computes at once; for requests whose units are in the own table. */
export function computeNow(input: unknown): ComputeResult {
	const steps = computeInBlocks(input);
	for (;;) {
		const step = steps.next(undefined);
		if (step.done === true) return step.value;
	}
}

/**
 * Computes a request, loading unusual units first and pausing between blocks where asked to.
 * @throws ProblemError for any fault of the request; the signal's reason when aborted
 */
export async function compute(input: unknown, options: ComputeOptions = {}): Promise<ComputeResult> {
	await loadUnits(unitTexts(requestOf(input)));
	const steps = computeInBlocks(input, options.delegate !== undefined);
	let shares: readonly Share[] | undefined;
	for (;;) {
		options.signal?.throwIfAborted();
		const step = steps.next(shares);
		shares = undefined;
		if (step.done === true) return step.value;
		if (typeof step.value === 'number') options.onProgress?.(step.value);
		else shares = await options.delegate?.(step.value);
		await options.pause?.();
	}
}
