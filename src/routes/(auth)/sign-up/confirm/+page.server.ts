import { addressSchema } from '$lib/schemas/accounts';
import { sourceOf } from '$lib/server/access/limit';
import { rememberedAddress } from '$lib/server/accounts/pending-address';
import { resendConfirmation } from '$lib/server/accounts/sign-up';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { safeReturnTo } from '$lib/server/http/return-to';
import { mailReader } from '$lib/server/mail/reader';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = ({ cookies, url }) => ({
	email: rememberedAddress(cookies),
	returnTo: safeReturnTo(url.searchParams.get('returnTo'), ''),
	mailReader: mailReader()
});

export const actions: Actions = {
	default: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, addressSchema);
		if ('fault' in read) return read.fault;
		const values = typedValues(form);
		const work = resendConfirmation(
			read.data.email,
			sourceOf(event.getClientAddress()),
			undefined,
			safeReturnTo(values.returnTo, '')
		);
		const done = await orFormFault(event, work, values);
		if ('fault' in done) return done.fault;
		return { errors: {} as Record<string, string>, values, sent: true };
	}
};
