import type { Method } from '../methods/types';
import { enoughTrials } from '../uncertainty/monte-carlo';
import { choiceAt, numberAt, objectAt, pointer, quoted, textAt } from './json';
import { ProblemError } from './problem';

export interface CheckedEvaluation {
	propagation: 'none' | 'first-order' | 'monte-carlo';
	trials: number | 'adaptive';
	digits: 1 | 2;
	seed: string;
	coverage: number;
	interval: 'symmetric' | 'shortest';
	/** Outputs asked for; all of them where left out. */
	outputs: readonly string[] | undefined;
}

export const defaultEvaluation: CheckedEvaluation = {
	propagation: 'monte-carlo',
	trials: 200_000,
	digits: 2,
	seed: 'noonmark',
	coverage: 0.95,
	interval: 'symmetric',
	outputs: undefined
};

const leastTrials = 10_000;
const mostTrials = 1e8;

export function evaluationAt(method: Method, given: unknown, path: string): CheckedEvaluation {
	if (given === undefined) return defaultEvaluation;
	const entry = objectAt(given, path, [
		'propagation',
		'trials',
		'digits',
		'seed',
		'coverage',
		'interval',
		'outputs',
		'sensitivity'
	]);
	const at = (key: string) => pointer(path, key);
	const checked = { ...defaultEvaluation };
	if (entry.sensitivity !== undefined) {
		choiceAt(entry.sensitivity, at('sensitivity'), ['variance-based']);
		throw new ProblemError(
			'not-available',
			'Variance-based sensitivities are not available yet.',
			at('sensitivity')
		);
	}
	if (entry.propagation !== undefined) {
		checked.propagation = choiceAt(entry.propagation, at('propagation'), [
			'none',
			'first-order',
			'monte-carlo'
		]);
	}
	if (entry.trials !== undefined) checked.trials = trialsAt(entry.trials, at('trials'));
	if (entry.digits !== undefined) {
		if (entry.digits !== 1 && entry.digits !== 2) {
			throw new ProblemError('unknown-choice', 'The digits to settle are 1 or 2.', at('digits'));
		}
		checked.digits = entry.digits;
	}
	if (entry.seed !== undefined) checked.seed = textAt(entry.seed, at('seed'), 1000);
	if (entry.coverage !== undefined) {
		checked.coverage = numberAt(entry.coverage, at('coverage'));
		if (!(checked.coverage >= 0.01 && checked.coverage <= 0.9999)) {
			throw new ProblemError('outside-domain', 'The coverage must lie from 0.01 to 0.9999.', at('coverage'));
		}
	}
	if (entry.interval !== undefined) {
		checked.interval = choiceAt(entry.interval, at('interval'), ['symmetric', 'shortest']);
	}
	if (checked.trials !== 'adaptive' && !enoughTrials(checked.trials, checked.coverage)) {
		throw new ProblemError('too-few-trials', 'That coverage needs more trials.', at('trials'));
	}
	if (entry.outputs !== undefined) checked.outputs = outputsAt(method, entry.outputs, at('outputs'));
	return checked;
}

function trialsAt(value: unknown, path: string): number | 'adaptive' {
	if (value === 'adaptive') return value;
	const trials = numberAt(value, path);
	if (!Number.isInteger(trials) || trials < leastTrials || trials > mostTrials) {
		throw new ProblemError(
			'outside-domain',
			'The number of trials must be a whole number from 10 000 to 100 000 000, or "adaptive".',
			path
		);
	}
	return trials;
}

function outputsAt(method: Method, value: unknown, path: string): readonly string[] {
	if (!Array.isArray(value) || value.length === 0) {
		throw new ProblemError('wrong-type', 'A list of outputs is expected.', path);
	}
	return value.map((entry: unknown, i) => {
		const at = pointer(path, i);
		const id = textAt(entry, at, 200);
		if (!isOutput(method, id)) {
			throw new ProblemError('unknown-output', `${method.id} has no output ${quoted(id)}.`, at);
		}
		return id;
	});
}

/** Whether the method can give that output; one whose id ends in a dot stands for all that follow it. */
export function isOutput(method: Method, id: string): boolean {
	return method.outputs.some(
		(output) => output.id === id || (output.id.endsWith('.') && id.startsWith(output.id))
	);
}
