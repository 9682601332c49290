import { redirect } from '@sveltejs/kit';
import { can, type Action } from '$lib/server/access/can';
import { homeOf } from '$lib/server/access/home';
import { membershipsOf } from '$lib/server/organisations/memberships';
import type { LayoutServerLoad } from './$types';

/** The parts of the service, and what one must be allowed to see there. */
const sections: readonly { href: string; label: string; needs: Action }[] = [
	{ href: '/dossiers', label: 'Dossiers', needs: 'dossier.read' },
	{ href: '/calculations', label: 'Calculations', needs: 'calculation.read' },
	{ href: '/reports', label: 'Reports', needs: 'report.read' },
	{ href: '/billing', label: 'Billing', needs: 'billing.manage' }
];

/** Who is reading and for which organisation. The guard hook has turned strangers away before this runs. */
export const load: LayoutServerLoad = async ({ locals }) => {
	const { person, membership } = locals;
	if (person === null) redirect(303, '/sign-in');
	const all = await membershipsOf(person);
	return {
		person,
		membership,
		home: membership === null ? '/' : homeOf(membership),
		sections: sections
			.filter(({ needs }) => can(membership, needs))
			.map(({ href, label }) => ({ href, label })),
		/** Where the name of the organisation leads: a guest has no page of it. */
		organisationPage: can(membership, 'organisation.read') ? '/organisation' : '/account#organisations',
		isGuest: membership !== null && membership.onlyDossiers !== null,
		organisations: all.map((one) => ({
			id: one.organisationId,
			name: one.organisationName,
			roles: one.roles,
			current: one.organisationId === membership?.organisationId
		}))
	};
};
