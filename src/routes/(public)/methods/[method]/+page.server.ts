import { error } from '@sveltejs/kit';
import { methodById } from '$lib/methods';
import { describeMethod } from '$lib/server/methods/describe';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = ({ params }) => {
	const method = methodById(params.method);
	if (method === undefined) error(404, 'There is no method of that name. The list of methods has them all.');
	return { method: describeMethod(method) };
};
