import type { RequestEvent } from '@sveltejs/kit';
import { invitationSchema } from '../../schemas/organisations';
import { toldOf } from '../organisations/invitations/send';
import { resendInvitation, revokeInvitation } from '../organisations/invitations/withdraw';
import { orFormFault, readForm } from './forms';

/* What the two pages that list open invitations, of the organisation and of a dossier, do with one of them. */

const clear = { errors: {} as Record<string, string>, values: {} as Record<string, string> };

/** Sends the invitation that the form names once more. */
export async function resendAction(event: RequestEvent) {
	const read = readForm(await event.request.formData(), invitationSchema);
	if ('fault' in read) return read.fault;
	const done = await orFormFault(event, resendInvitation(event.locals.membership, read.data.id));
	if ('fault' in done) return done.fault;
	return { ...clear, ...toldOf(done.data) };
}

/** Takes the invitation that the form names back. */
export async function revokeAction(event: RequestEvent) {
	const read = readForm(await event.request.formData(), invitationSchema);
	if ('fault' in read) return read.fault;
	const done = await orFormFault(event, revokeInvitation(event.locals.membership, read.data.id));
	if ('fault' in done) return done.fault;
	return { ...clear, done: `The invitation of ${done.data.email} is taken back. Its link no longer works.` };
}
