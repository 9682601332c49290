import { randomUUID } from 'node:crypto';
import { redirect } from '@sveltejs/kit';
import { seatChangeSchema } from '$lib/schemas/billing';
import { changeSeats } from '$lib/server/billing/change-seats';
import { seatsText } from '$lib/server/billing/review-text';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const seats = event.url.searchParams.get('seats') ?? '';
	const mark = randomUUID();
	const reviewed = await orFormFault(event, seatsText(event.locals.membership, Number(seats)));
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
