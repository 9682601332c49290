import { fail } from '@sveltejs/kit';
import {
	inviteMemberSchema,
	organisationSchema,
	removeMemberSchema,
	rolesSchema
} from '$lib/schemas/organisations';
import { can } from '$lib/server/access/can';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault, readForm, typedValues } from '$lib/server/http/forms';
import { resendAction, revokeAction } from '$lib/server/http/invitation-actions';
import { inviteMember } from '$lib/server/organisations/invitations/invite';
import { listOpenInvitations } from '$lib/server/organisations/invitations/open';
import { toldOf } from '$lib/server/organisations/invitations/send';
import { changeRoles, countSeats, listMembers, removeMember } from '$lib/server/organisations/members';
import { readOrganisation, updateOrganisation } from '$lib/server/organisations/settings';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals: { membership } }) => {
	const seesMembers = can(membership, 'members.read');
	return {
		settings: await orHttpError(readOrganisation(membership)),
		members: seesMembers ? await listMembers(membership) : [],
		seats: seesMembers ? await countSeats(membership) : null,
		invitations: await listOpenInvitations(membership, { kind: 'member' }),
		mayManage: can(membership, 'organisation.manage'),
		mayManageMembers: can(membership, 'members.manage'),
		mayPay: can(membership, 'billing.manage')
	};
};

const none: Record<string, string> = {};

/** A field that is given several times comes back as one text, so that the boxes stay as they were ticked. */
function typedInvitation(form: FormData): Record<string, string> {
	return { email: String(form.get('email') ?? ''), roles: form.getAll('roles').join(' ') };
}

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
	invite: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, inviteMemberSchema);
		if ('fault' in read) return fail(400, { errors: read.fault.data.errors, values: typedInvitation(form) });
		const work = inviteMember(event.locals.membership, read.data);
		const done = await orFormFault(event, work, typedInvitation(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, ...toldOf(done.data) };
	},
	resend: (event) => resendAction(event),
	revoke: (event) => revokeAction(event),
	roles: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, rolesSchema);
		if ('fault' in read) return read.fault;
		const work = changeRoles(event.locals.membership, read.data.userId, read.data.roles);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		return { errors: none, values: none, done: 'The roles are changed. They count from now on.' };
	},
	remove: async (event) => {
		const form = await event.request.formData();
		const read = readForm(form, removeMemberSchema);
		if ('fault' in read) return read.fault;
		const work = removeMember(event.locals.membership, read.data.userId);
		const done = await orFormFault(event, work, typedValues(form));
		if ('fault' in done) return done.fault;
		const { revoked } = done.data;
		const taken =
			revoked === 0
				? ''
				: ` ${revoked === 1 ? 'One open invitation that they had sent is' : `${revoked} open invitations that they had sent are`} taken back.`;
		return {
			errors: none,
			values: none,
			done: `The member is taken out, and a seat is free. What they wrote stays.${taken}`
		};
	}
};
