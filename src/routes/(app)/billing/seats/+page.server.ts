import { randomUUID } from 'node:crypto';
import { redirect } from '@sveltejs/kit';
import { seatChangeSchema, seatsSchema } from '$lib/schemas/billing';
import { changeSeats } from '$lib/server/billing/change-seats';
import { seatsText } from '$lib/server/billing/review-text';
import { requireAction } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const { membership } = event.locals;
	const asked = new FormData();
	asked.append('seats', event.url.searchParams.get('seats') ?? '');
	const seats = String(asked.get('seats'));
	const mark = randomUUID();
	const read = readForm(asked, seatsSchema);
	if ('fault' in read) {
		await orHttpError(Promise.resolve().then(() => requireAction(membership, 'billing.manage')));
		return { seats, mark, review: null, errors: read.fault.data.errors };
	}
	const reviewed = await orFormFault(event, seatsText(membership, read.data.seats));
	if ('fault' in reviewed) return { seats, mark, review: null, errors: reviewed.fault.data.errors };
	return { seats, mark, review: reviewed.data, errors: {} };
};

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, seatChangeSchema);
		if ('fault' in read) return read.fault;
		const { seats, mark } = read.data;
		const changed = await orFormFault(
			event,
			changeSeats(event.locals.membership, seats, mark),
			typedValues(form)
		);
		if ('fault' in changed) return changed.fault;
		redirect(303, '/billing?done=seats');
	}
};
