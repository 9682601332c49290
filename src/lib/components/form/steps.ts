import type { CalculationDraft } from '$lib/calculation/draft';
import type { Method } from '$lib/methods/types';

export interface Step {
	id: string;
	title: string;
	note?: string;
	href: string;
}

const kindNotes: Record<CalculationDraft['kind'], string> = {
	'find-value': 'find a value',
	'check-claim': 'check a claim',
	'test-limit': 'test a limit'
};

/** The steps of a calculation's form, in order, with where each stands. */
export function stepsOf(id: string, draft: CalculationDraft, method: Method | undefined): Step[] {
	const base = `/calculations/${id}`;
	const steps: Step[] = [
		{ id: 'question', title: 'Question', note: kindNotes[draft.kind], href: `${base}/question` },
		{
			id: 'method',
			title: 'Method',
			href: `${base}/method`,
			...(method === undefined ? {} : { note: method.title })
		}
	];
	if (method === undefined) return steps;
	for (const group of method.groups) {
		const inputs = method.inputs.filter((input) => input.group === group.id && input.kind === 'number');
		const answered = inputs.filter(({ id: input }) => (draft.assumptions[input]?.value ?? '').trim() !== '');
		steps.push({
			id: group.id,
			title: group.title,
			href: `${base}/inputs/${group.id}`,
			...(inputs.length === 0 ? {} : { note: `${answered.length} of ${inputs.length} answered` })
		});
	}
	if (draft.kind === 'check-claim')
		steps.push({ id: 'compare', title: 'The claim', href: `${base}/compare` });
	if (draft.kind === 'test-limit') steps.push({ id: 'compare', title: 'The limit', href: `${base}/compare` });
	steps.push(
		{ id: 'evaluation', title: 'How to compute', href: `${base}/evaluation` },
		{ id: 'check', title: 'Everything to check', href: `${base}/check` },
		{ id: 'result', title: 'Result', href: `${base}/result` }
	);
	return steps;
}

/** The step after one, for "Continue to …". */
export function stepAfter(steps: readonly Step[], id: string): Step | undefined {
	return steps[steps.findIndex((step) => step.id === id) + 1];
}
