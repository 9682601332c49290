import { fail, redirect } from '@sveltejs/kit';
import { lineId } from '$lib/components/review/open-at';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, textOf, typedValues } from '$lib/server/http/forms';
import { idIn, requireId } from '$lib/server/http/ids';
import { requestPreview } from '$lib/server/reports/preview';
import { addComment, answerComment, settleComment, unsettleComment } from '$lib/server/reviews/comments';
import { returnReport } from '$lib/server/reviews/decide';
import { enterFigure, withdrawFigure, type FigureInput } from '$lib/server/reviews/own-figure';
import { recomputeReport } from '$lib/server/reviews/recompute';
import { typesetEquations } from '$lib/server/reviews/typeset';
import { reviewView } from '$lib/server/reviews/view';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const { membership } = locals;
	const view = await orHttpError(reviewView(membership, params.id));
	return { view, typeset: await orHttpError(typesetEquations(membership, params.id)) };
};

export const actions: Actions = {
	remark: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const place = textOf(form, 'place');
		const added = await orFormFault(
			event,
			addComment(locals.membership, params.id, { place, body: textOf(form, 'body') }),
			typedValues(form)
		);
		if ('fault' in added) {
			const { errors, values } = added.fault.data;
			const { place: gone, ...others } = errors;
			return fail(added.fault.status, { errors: gone ? { form: gone, ...others } : others, values });
		}
		redirect(303, `?done=remark#${lineId(place)}`);
	},

	answer: async (event) => {
		const form = await event.request.formData();
		const id = requireId(form, 'commentId');
		const answered = await orFormFault(
			event,
			answerComment(event.locals.membership, id, { body: textOf(form, 'body') }),
			typedValues(form)
		);
		if ('fault' in answered) return answered.fault;
		redirect(303, `?done=answer#remark-${id}`);
	},

	settle: async ({ locals, request }) => {
		const id = requireId(await request.formData(), 'commentId');
		await orHttpError(settleComment(locals.membership, id));
		redirect(303, `?done=settled#remark-${id}`);
	},

	unsettle: async ({ locals, request }) => {
		const id = requireId(await request.formData(), 'commentId');
		await orHttpError(unsettleComment(locals.membership, id));
		redirect(303, `?done=unsettled#remark-${id}`);
	},

	figure: async (event) => {
		const { locals, params, request } = event;
		const form = await request.formData();
		const field = (name: string) => textOf(form, name);
		const entered = await orFormFault(
			event,
			enterFigure(locals.membership, params.id, {
				runId: idIn(form, 'runId') ?? '',
				output: field('output'),
				// Checked by the use case, like every other field.
				kind: field('kind') as FigureInput['kind'],
				value: field('value'),
				unit: field('unit'),
				giveOrTake: field('giveOrTake'),
				// The box holds the words of the result itself.
				averages: field('same') || field('averages'),
				route: field('route')
			}),
			typedValues(form)
		);
		if ('fault' in entered) return entered.fault;
		redirect(303, `?done=figure#figure-${entered.data}`);
	},

	withdraw: async ({ locals, request }) => {
		const id = requireId(await request.formData(), 'figureId');
		await orHttpError(withdrawFigure(locals.membership, id));
		redirect(303, `?done=withdrawn#figure-${id}`);
	},

	recompute: async (event) => {
		const outcome = await orFormFault(event, recomputeReport(event.locals.membership, event.params.id));
		return 'fault' in outcome ? outcome.fault : { recomputed: outcome.data };
	},

	preview: async (event) => {
		const preview = await orFormFault(event, requestPreview(event.locals.membership, event.params.id));
		if ('fault' in preview) return preview.fault;
		redirect(303, `/reports/${event.params.id}/previews/${preview.data}`);
	},

	return: async (event) => {
		const form = await event.request.formData();
		const returned = await orFormFault(
			event,
			returnReport(event.locals.membership, event.params.id, { reasons: textOf(form, 'reasons') }),
			typedValues(form)
		);
		if ('fault' in returned) return returned.fault;
		redirect(303, `/reports/${event.params.id}?done=returned`);
	}
};
