import { fail, redirect, type ActionFailure } from '@sveltejs/kit';
import { stepAfter, stepsOf } from '$lib/components/form/steps';
import { methodById } from '$lib/methods';
import { orHttpError } from './errors';
import type { Submitted } from '../calculations/submit';

export interface StepFailure {
	faults: Record<string, string>;
	version: number;
}

/**
 * Where a submitted step leads: back to itself with its faults, to the next step, or to the dossier. Everything typed
 * is saved in each case.
 */
export async function finishStep(
	id: string,
	step: string,
	form: FormData,
	work: Promise<Submitted>
): Promise<ActionFailure<StepFailure>> {
	const { draft, version, faults, dossierId } = await orHttpError(work);
	const next = form.get('next');
	if (next === 'close') redirect(303, `/dossiers/${dossierId}`);
	if (next === 'refresh') redirect(303, `?`);
	if (Object.keys(faults).length > 0) return fail(400, { faults, version });
	const steps = stepsOf(id, draft, draft.method === null ? undefined : methodById(draft.method));
	if (next === 'check') redirect(303, `/calculations/${id}/check`);
	redirect(303, stepAfter(steps, step)?.href ?? `/calculations/${id}/check`);
}
