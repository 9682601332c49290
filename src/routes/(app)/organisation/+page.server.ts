import { error, redirect } from '@sveltejs/kit';
import {
	addMemberSchema,
	memberSchema,
	organisationSchema,
	rolesSchema,
	switchSchema
} from '$lib/schemas/organisations';
import { can } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { chooseOrganisation } from '$lib/server/organisations/current';
import { addMember, changeRoles, listMembers, removeMember } from '$lib/server/organisations/members';
import { membershipIn } from '$lib/server/organisations/memberships';
import { readOrganisation, updateOrganisation } from '$lib/server/organisations/settings';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals: { membership } }) => ({
	settings: await orHttpError(readOrganisation(membership)),
	members: can(membership, 'members.read') ? await listMembers(membership) : [],
	mayManage: can(membership, 'organisation.manage'),
	mayManageMembers: can(membership, 'members.manage')
});

const none: Record<string, string> = {};

export const actions: Actions = {
	save: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, organisationSchema);
		if ('fault' in read) return read.fault;
		const work = updateOrganisation(event.locals.membership, read.data);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'The letterhead and the rules are saved.' };
	},
	add: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, addMemberSchema);
		if ('fault' in read) return read.fault;
		const work = addMember(event.locals.membership, read.data);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'The new member is in.' };
	},
	roles: async (event) => {
		const read = readForm(await event.request.formData(), rolesSchema);
		if ('fault' in read) return read.fault;
		const work = changeRoles(event.locals.membership, read.data.userId, read.data.roles);
		const done = await orFormFault(event, work);
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'The roles are changed. They count from now on.' };
	},
	remove: async (event) => {
		const read = readForm(await event.request.formData(), memberSchema);
		if ('fault' in read) return read.fault;
		const work = removeMember(event.locals.membership, read.data.userId);
		const done = await orFormFault(event, work);
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'The member is taken out. What they wrote stays.' };
	},
	switch: async (event) => {
		const { person } = event.locals;
		if (person === null) error(401, 'Please sign in first.');
		const read = readForm(await event.request.formData(), switchSchema);
		if ('fault' in read) return read.fault;
		const wanted = await membershipIn(person, read.data.organisationId);
		if (wanted === null) error(404, 'This organisation does not exist, or you have no access to it.');
		chooseOrganisation(event.cookies, wanted.organisationId);
		redirect(303, '/dossiers');
	}
};
