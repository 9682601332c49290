import { comparisonAt } from './check-comparison';
import { correlationsAt } from './check-correlations';
import { evaluationAt, type CheckedEvaluation } from './check-evaluation';
import { isPlainObject, objectAt } from './json';
import { compileModel, type CompiledModel } from './model';
import { ProblemError } from './problem';
import type { Comparison, ComputeRequest, Correlation } from './types';

export interface CheckedRequest {
	/** As given; what the record holds. */
	request: ComputeRequest;
	model: CompiledModel;
	correlations: Correlation[];
	evaluation: CheckedEvaluation;
	comparison: Comparison | undefined;
}

/** A request, or the request of a stored record. */
export function requestOf(value: unknown): unknown {
	return isPlainObject(value) && Object.hasOwn(value, 'request') && Object.hasOwn(value, 'result')
		? value.request
		: value;
}

/**
 * Checks a request in full before anything is computed.
 * @throws ProblemError with the place of the first fault
 */
export function checkRequest(value: unknown): CheckedRequest {
	const entry = objectAt(value, '', [
		'method',
		'inputs',
		'options',
		'correlations',
		'evaluation',
		'compareWith',
		'solveFor'
	]);
	const model = compileModel(entry.method, entry.inputs, entry.options);
	if (entry.solveFor !== undefined) {
		throw new ProblemError('not-available', 'Solving for an input is not available yet.', '/solveFor');
	}
	const evaluation = evaluationAt(model.method, entry.evaluation, '/evaluation');
	const correlations = correlationsAt(
		entry.correlations,
		'/correlations',
		new Set(model.columns.map(({ id }) => id)),
		model.aliases
	);
	const comparison = comparisonAt(model.method, entry.compareWith, '/compareWith');
	return { request: value as ComputeRequest, model, correlations, evaluation, comparison };
}
