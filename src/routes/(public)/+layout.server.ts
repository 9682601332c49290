import { homeOf } from '$lib/server/access/home';
import type { LayoutServerLoad } from './$types';

/** Public pages say no more of a signed-in reader than where their work is. */
export const load: LayoutServerLoad = ({ locals }) => ({
	signedIn: locals.person !== null,
	home: locals.person === null ? '/' : homeOf(locals.membership)
});
