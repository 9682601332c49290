import { redirect } from '@sveltejs/kit';
import { membershipsOf } from '$lib/server/organisations/memberships';
import type { LayoutServerLoad } from './$types';

/** Who is reading and for which organisation. The guard hook has turned strangers away before this runs. */
export const load: LayoutServerLoad = async ({ locals }) => {
	const { person, membership } = locals;
	if (person === null) redirect(303, '/sign-in');
	const all = await membershipsOf(person);
	return {
		person,
		membership,
		organisations: all.map((one) => ({ id: one.organisationId, name: one.organisationName }))
	};
};
