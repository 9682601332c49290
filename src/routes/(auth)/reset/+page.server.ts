import { addressSchema } from '$lib/schemas/accounts';
import { sourceOf } from '$lib/server/access/limit';
import { requestReset } from '$lib/server/accounts/reset-password';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { mailReader } from '$lib/server/mail/reader';
import type { Actions } from './$types';

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, addressSchema);
		if ('fault' in read) return read.fault;
		const values = typedValues(form);
		const work = requestReset(read.data.email, sourceOf(event.getClientAddress()));
		const done = await orFormFault(event, work, values);
		if ('fault' in done) return done.fault;
		return { errors: {} as Record<string, string>, values, sent: true, mailReader: mailReader() };
	}
};
