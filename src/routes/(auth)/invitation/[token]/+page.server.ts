import { redirect } from '@sveltejs/kit';
import { rememberAddress } from '$lib/server/accounts/pending-address';
import { homeOf } from '$lib/server/access/home';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import { chooseOrganisation } from '$lib/server/organisations/current';
import {
	acceptInvitation,
	isAddressee,
	maskedAddress,
	openInvitation,
	whyNot
} from '$lib/server/organisations/invitations/accept';
import { membershipIn } from '$lib/server/organisations/memberships';
import { withReturn } from '$lib/with-return';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, cookies, setHeaders }) => {
	// The address of this page is a secret, and what it says changes.
	setHeaders({ 'cache-control': 'private, no-store' });
	const invitation = await orHttpError(openInvitation(params.token));
	const { person } = locals;
	const {
		state,
		email,
		organisationId,
		organisationName,
		kind,
		roles,
		dossier,
		inviter,
		expiresAt,
		acceptedBy
	} = invitation;
	const mine = person !== null && isAddressee(invitation, person);
	const isOpen = state === 'open';
	// So that the sign-up page need not ask for it again.
	if (isOpen && person === null) rememberAddress(cookies, email);
	return {
		reader: person === null ? null : { name: person.name, email: person.email },
		home: person === null ? '/' : homeOf(locals.membership),
		returnTo: `/invitation/${params.token}`,
		mine,
		// Somebody who was taken out since has not got what the link gave.
		usedByReader:
			person !== null && acceptedBy === person.id && (await membershipIn(person, organisationId)) !== null,
		invitation: {
			state,
			organisationName,
			kind,
			roles,
			dossierTitle: dossier?.title ?? null,
			inviterName: inviter?.name ?? null,
			expiresAt,
			// Whoever is signed in as somebody else learns no more of the address than is needed to know it again.
			email: person !== null && !mine ? maskedAddress(email) : email,
			why: state === 'open' ? null : whyNot[state]
		}
	};
};

export const actions: Actions = {
	default: async (event) => {
		const { person } = event.locals;
		const { token } = event.params;
		if (person === null) redirect(303, withReturn('/sign-in', `/invitation/${token}`));
		const done = await orFormFault(event, acceptInvitation(person, token));
		if ('fault' in done) return done.fault;
		const { organisationId, kind, dossier } = done.data;
		chooseOrganisation(event.cookies, organisationId);
		redirect(
			303,
			kind === 'guest' && dossier !== null
				? `/dossiers/${dossier.id}`
				: homeOf(await membershipIn(person, organisationId))
		);
	}
};
