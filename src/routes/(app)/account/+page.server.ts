import { error, redirect } from '@sveltejs/kit';
import { changePasswordSchema, nameSchema, sessionSchema } from '$lib/schemas/accounts';
import { leaveSchema, switchSchema } from '$lib/schemas/organisations';
import { homeOf } from '$lib/server/access/home';
import { changeName, changePassword } from '$lib/server/accounts/own-account';
import { closeAllSessions, listSessions, revokeSession } from '$lib/server/accounts/sessions';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { chooseOrganisation } from '$lib/server/organisations/current';
import { leaveOrganisation } from '$lib/server/organisations/members';
import { membershipIn } from '$lib/server/organisations/memberships';
import type { Person } from '$lib/server/accounts/person';
import type { Actions, PageServerLoad } from './$types';

function signedIn(locals: App.Locals): Person {
	if (locals.person === null) error(401, 'Please sign in first.');
	return locals.person;
}

export const load: PageServerLoad = async ({ locals, url }) => ({
	sessions: await listSessions(signedIn(locals), locals.sessionId),
	hasLeft: url.searchParams.get('notice') === 'left'
});

const none: Record<string, string> = {};

export const actions: Actions = {
	name: async (event) => {
		const person = signedIn(event.locals);
		const form = await event.request.formData();
		const read = readForm(form, nameSchema);
		if ('fault' in read) return read.fault;
		const done = await orFormFault(event, changeName(person, read.data.name), typedValues(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'Your name is saved.' };
	},
	password: async (event) => {
		const person = signedIn(event.locals);
		const form = await event.request.formData();
		const read = readForm(form, changePasswordSchema, ['current', 'next']);
		if ('fault' in read) return read.fault;
		const work = changePassword(person, read.data, event.locals.sessionId);
		const done = await orFormFault(event, work);
		if ('fault' in done) return done.fault;
		return {
			errors: none,
			values: none,
			done: 'Your password is changed, and you are signed out everywhere else.'
		};
	},
	revoke: async (event) => {
		const person = signedIn(event.locals);
		const read = readForm(await event.request.formData(), sessionSchema);
		if ('fault' in read) error(404, 'This session does not exist, or you have no access to it.');
		const done = await orFormFault(event, revokeSession(person, read.data.session));
		if ('fault' in done) return done.fault;
		if (read.data.session === event.locals.sessionId) redirect(303, '/sign-in?notice=signed-out');
		return { errors: none, values: none, done: 'That session has ended.' };
	},
	revokeOthers: async ({ locals }) => {
		await closeAllSessions(signedIn(locals).id, locals.sessionId);
		return { errors: none, values: none, done: 'All your other sessions have ended.' };
	},
	switch: async (event) => {
		const person = signedIn(event.locals);
		const read = readForm(await event.request.formData(), switchSchema);
		if ('fault' in read) return read.fault;
		const wanted = await membershipIn(person, read.data.organisationId);
		if (wanted === null) error(404, 'This organisation does not exist, or you have no access to it.');
		chooseOrganisation(event.cookies, wanted.organisationId);
		redirect(303, homeOf(wanted));
	},
	leave: async (event) => {
		const person = signedIn(event.locals);
		const form = await event.request.formData();
		const read = readForm(form, leaveSchema);
		if ('fault' in read) return read.fault;
		const work = leaveOrganisation(person, read.data.organisationId);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		redirect(303, '/account?notice=left#organisations');
	}
};
