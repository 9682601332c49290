import { redirect } from '@sveltejs/kit';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ params, parent }) => {
	const { calculation } = await parent();
	redirect(307, `/calculations/${params.id}/${calculation.draft.method === null ? 'question' : 'check'}`);
};
