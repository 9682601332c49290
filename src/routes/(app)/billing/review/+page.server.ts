import { redirect } from '@sveltejs/kit';
import { purchaseSchema } from '$lib/schemas/billing';
import { startCheckout } from '$lib/server/billing/checkout';
import { billingOverview } from '$lib/server/billing/overview';
import { purchaseText } from '$lib/server/billing/review-text';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const { membership } = event.locals;
	const { offer } = await orHttpError(billingOverview(membership));
	const asked = new FormData();
	for (const [name, value] of event.url.searchParams) asked.append(name, value);
	const values = typedValues(asked);
	const read = readForm(asked, purchaseSchema);
	if ('fault' in read)
		return { offer, values, review: null, errors: choiceErrors(read.fault.data.errors, values) };
	const reviewed = await orFormFault(event, purchaseText(membership, read.data));
	if ('fault' in reviewed) return { offer, values, review: null, errors: reviewed.fault.data.errors };
	return { offer, values, review: reviewed.data, errors: {} };
};

/** A choice between two forms fails as a whole; what is wrong is in the one that was sent. */
function choiceErrors(
	errors: Record<string, string>,
	values: Record<string, string>
): Record<string, string> {
	if (!('form' in errors)) return errors;
	return 'packs' in values
		? { packs: 'Give the packs as a whole number, such as 1.' }
		: { seats: 'Give the seats as a whole number, such as 3, and choose monthly or yearly.' };
}

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, purchaseSchema);
		if ('fault' in read) return read.fault;
		const started = await orFormFault(
			event,
			startCheckout(event.locals.membership, read.data),
			typedValues(form)
		);
		if ('fault' in started) return started.fault;
		redirect(303, started.data);
	}
};
