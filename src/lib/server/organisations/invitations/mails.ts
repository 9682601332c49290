import type { MemberRole } from '../../access/membership';
import { compose, linkTo } from '../../mail/compose';
import type { Mail } from '../../mail/transport';
import { invitationDays } from './state';

export interface InvitationMailContent {
	email: string;
	inviter: string;
	organisation: string;
	roles: readonly MemberRole[];
	/** Title of the dossier for a guest, null for a member. */
	dossier: string | null;
}

/** "author and reviewer", "owner, author and billing" */
export function inWords(roles: readonly string[]): string {
	const last = roles.at(-1) ?? '';
	return roles.length < 2 ? last : `${roles.slice(0, -1).join(', ')} and ${last}`;
}

/** The way in for somebody who may have no account yet; names of people and organisations stand in quotation marks. */
export function invitationMail(content: InvitationMailContent, token: string): Mail {
	const { email, inviter, organisation, roles, dossier } = content;
	const asked =
		dossier === null
			? `${inviter} invites you to work with “${organisation}” in Noonmark, as ${inWords(roles)}. Follow this link to accept:`
			: `${inviter} of “${organisation}” asks you to review one dossier in Noonmark, “${dossier}”, as a guest. Follow this link to accept:`;
	return compose(
		{ name: '', email },
		dossier === null ? `Work with ${organisation} in Noonmark` : `Review a dossier of ${organisation}`,
		[
			asked,
			`The link works once, within ${invitationDays} days, for an account with this address: ${email}. If you have none yet, the page leads you to one. ${
				dossier === null
					? 'Nobody becomes a member without accepting.'
					: 'Reviewing as a guest costs nothing; you see this dossier and nothing else.'
			}`,
			'If you do not know who this is, do nothing: without the link nothing happens.'
		],
		{ label: 'Look at the invitation', href: linkTo(`/invitation/${token}`) }
	);
}
