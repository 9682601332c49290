import { error, redirect } from '@sveltejs/kit';
import { endGuestSchema, inviteGuestSchema, leaveDossierSchema } from '$lib/schemas/organisations';
import { can } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { resendAction, revokeAction } from '$lib/server/http/invitation-actions';
import { endGuestAccess, leaveDossier, peopleOfDossier } from '$lib/server/organisations/guests';
import { inviteGuest } from '$lib/server/organisations/invitations/invite';
import { toldOf } from '$lib/server/organisations/invitations/send';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals: { membership }, params }) => ({
	...(await orHttpError(peopleOfDossier(membership, params.id))),
	mayManage: can(membership, 'guests.manage')
});

const none: Record<string, string> = {};

export const actions: Actions = {
	invite: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, inviteGuestSchema);
		if ('fault' in read) return read.fault;
		const work = inviteGuest(event.locals.membership, event.params.id, read.data);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, ...toldOf(done.data) };
	},
	resend: (event) => resendAction(event),
	revoke: (event) => revokeAction(event),
	end: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, endGuestSchema);
		if ('fault' in read) return read.fault;
		const work = endGuestAccess(event.locals.membership, event.params.id, read.data.userId);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'The guest’s access has ended. What they wrote stays.' };
	},
	leave: async (event) => {
		const { person, membership } = event.locals;
		if (person === null) error(401, 'Please sign in first.');
		const read = readForm(await event.request.formData(), leaveDossierSchema);
		if ('fault' in read) return read.fault;
		const done = await orFormFault(event, leaveDossier(person, membership, event.params.id));
		if ('fault' in done) return done.fault;
		redirect(303, '/account?notice=left#organisations');
	}
};
