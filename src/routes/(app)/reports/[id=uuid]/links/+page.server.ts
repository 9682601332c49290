import { revokeSchema, shareLinkSchema } from '$lib/schemas/sharing';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { getReport } from '$lib/server/reports/load';
import { createShareLink, listShareLinks, revokeShareLink } from '$lib/server/sharing/links';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const links = await orHttpError(listShareLinks(locals.membership, params.id));
	const { id, number, revision, title, state } = await orHttpError(getReport(locals.membership, params.id));
	return { report: { id, number, revision, title, state }, links };
};

const none: Record<string, string> = {};

export const actions: Actions = {
	make: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, shareLinkSchema);
		if ('fault' in read) return read.fault;
		const work = createShareLink(event.locals.membership, event.params.id, read.data);
		const made = await orFormFault(event, work, typedValues(form));
		if ('fault' in made) return made.fault;
		return { errors: none, values: none, made: { ...made.data, recipient: read.data.recipient } };
	},
	revoke: async (event) => {
		const read = readForm(await event.request.formData(), revokeSchema);
		if ('fault' in read) return read.fault;
		const done = await orFormFault(event, revokeShareLink(event.locals.membership, read.data.linkId));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, revoked: done.data };
	}
};
