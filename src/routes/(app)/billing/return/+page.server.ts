import { redirect } from '@sveltejs/kit';
import { PaymentsAwayError } from '$lib/server/billing/errors';
import { returnFromPayment } from '$lib/server/billing/return';
import { orHttpError } from '$lib/server/http/errors';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, url }) => {
	const session = url.searchParams.get('session') ?? '';
	let back: Awaited<ReturnType<typeof returnFromPayment>> | null = null;
	try {
		back = await orHttpError(returnFromPayment(locals.membership, session));
	} catch (cause) {
		// Paid or not, it is found out without the buyer: by the event, or by the daily comparison.
		if (!(cause instanceof PaymentsAwayError)) throw cause;
	}
	const outcome = back?.outcome ?? ('away' as const);
	if (outcome === 'done') redirect(303, `/billing?done=${back?.kind === 'pack' ? 'pack' : 'plan'}`);
	return { outcome };
};
