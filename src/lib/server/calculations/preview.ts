import { compute } from '$lib/calculation/compute';
import type { CalculationDraft } from '$lib/calculation/draft';
import { draftSchema } from '$lib/calculation/draft-schema';
import { ProblemError } from '$lib/calculation/problem';
import { fieldOfProblem, toRequest } from '$lib/calculation/to-request';
import type { ComputeRequest } from '$lib/calculation/types';
import { methodById } from '$lib/methods';
import { answerView, emptyAnswer, type AnswerView } from '$lib/wording/answer-view';
import { requireAction } from '../access/can';
import { InvalidInputError } from '../access/errors';
import type { Membership } from '../access/membership';

/** Trials of a preview: enough for two digits of the uncertainty within some milliseconds. */
const previewTrials = 20_000;

function small(request: ComputeRequest): ComputeRequest {
	const { evaluation } = request;
	if (evaluation?.propagation !== 'monte-carlo') return request;
	const trials =
		typeof evaluation.trials === 'number' ? Math.min(evaluation.trials, previewTrials) : previewTrials;
	return { ...request, evaluation: { ...evaluation, trials } };
}

/** The running answer of a draft, or its faults by field. Null before a method is chosen. */
export async function answerOf(draft: CalculationDraft): Promise<AnswerView | null> {
	const method = draft.method === null ? undefined : methodById(draft.method);
	if (method === undefined) return null;
	const { request: whole, faults } = toRequest(draft, method);
	// What it is compared with is asked after the assumptions; the figures need not wait for it.
	const onlyComparison = Object.keys(faults).every((field) => /^(claim|limit)\./.test(field));
	const request =
		whole ?? (onlyComparison ? toRequest({ ...draft, kind: 'find-value' }, method).request : null);
	if (request === null) return emptyAnswer(draft, method, faults);
	try {
		const result = await compute(small(request));
		// The preview's few trials are its own doing, not the author's.
		const cautions = result.cautions.filter(({ code }) => code !== 'not-converged');
		return { ...answerView(draft, method, { ...result, cautions }), faults };
	} catch (cause) {
		if (cause instanceof ProblemError) {
			return emptyAnswer(draft, method, { ...faults, [fieldOfProblem(cause)]: cause.message });
		}
		throw cause;
	}
}

/**
 * The live preview: computes what is being typed; stores nothing.
 * @throws InvalidInputError for what is not a draft.
 */
export async function previewDraft(
	membership: Membership | null,
	draft: unknown
): Promise<AnswerView | null> {
	requireAction(membership, 'calculation.read');
	const parsed = draftSchema.safeParse(draft);
	if (!parsed.success) throw new InvalidInputError('What was sent is not a calculation; reload the page.');
	return answerOf(parsed.data);
}
