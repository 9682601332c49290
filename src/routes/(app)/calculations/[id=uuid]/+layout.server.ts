import { can } from '$lib/server/access/can';
import { getCalculation } from '$lib/server/calculations/load';
import { answerOf } from '$lib/server/calculations/preview';
import { listEvidence } from '$lib/server/evidence/list';
import { orHttpError } from '$lib/server/http/errors';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = async ({ locals, params }) => {
	const calculation = await orHttpError(getCalculation(locals.membership, params.id));
	return {
		calculation,
		evidence: (await orHttpError(listEvidence(locals.membership, calculation.dossier.id))).map(
			({ id, fileName }) => ({ id, fileName })
		),
		answer: await answerOf(calculation.draft),
		mayWrite: can(locals.membership, 'calculation.write')
	};
};
