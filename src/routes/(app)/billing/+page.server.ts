import { redirect } from '@sveltejs/kit';
import { billingOverview } from '$lib/server/billing/overview';
import { openPortal } from '$lib/server/billing/portal';
import { orHttpError } from '$lib/server/http/errors';
import { orFormFault } from '$lib/server/http/forms';
import type { Actions, PageServerLoad } from './$types';

const done: Readonly<Record<string, string>> = {
	plan: 'The plan is paid for and counts from now on.',
	pack: 'The exports are paid for and can be used.',
	seats: 'The seats are changed.'
};

export const load: PageServerLoad = async ({ locals, url }) => ({
	billing: await orHttpError(billingOverview(locals.membership)),
	done: done[url.searchParams.get('done') ?? ''] ?? null
});

export const actions: Actions = {
	portal: async (event) => {
		const opened = await orFormFault(event, openPortal(event.locals.membership));
		if ('fault' in opened) return opened.fault;
		redirect(303, opened.data);
	}
};
