import { error, redirect } from '@sveltejs/kit';
import { newOrganisationSchema } from '$lib/schemas/organisations';
import { homeOf } from '$lib/server/access/home';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { createOrganisation } from '$lib/server/organisations/create';
import { chooseOrganisation } from '$lib/server/organisations/current';
import type { Actions } from './$types';

export const actions: Actions = {
	default: async (event) => {
		const { person } = event.locals;
		if (person === null) error(401, 'Please sign in first.');
		const form = await event.request.formData();
		const read = readForm(form, newOrganisationSchema);
		if ('fault' in read) return read.fault;
		const done = await orFormFault(event, createOrganisation(person, read.data), typedValues(form));
		if ('fault' in done) return done.fault;
		chooseOrganisation(event.cookies, done.data.organisationId);
		redirect(303, homeOf(done.data));
	}
};
