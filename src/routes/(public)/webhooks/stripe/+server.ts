import { json } from '@sveltejs/kit';
import { RefusedEventError } from '$lib/server/billing/errors';
import { receiveEvent } from '$lib/server/billing/webhook';
import { readText } from '$lib/server/http/read-text';
import { log } from '$lib/server/log';
import type { RequestHandler } from './$types';

/** Bytes; the payment service's events are a small part of it. */
const largest = 1_000_000;

/** Events of the payment service. Whoever cannot sign is answered 400; any fault of ours 500, and it comes again. */
export const POST: RequestHandler = async ({ request }) => {
	const body = await readText(request, largest);
	try {
		return json({ event: await receiveEvent(body, request.headers.get('stripe-signature')) });
	} catch (cause) {
		if (!(cause instanceof RefusedEventError)) throw cause;
		log.warn({ reason: cause.message }, 'an event of the payment service was refused');
		return json({ message: cause.message }, { status: 400 });
	}
};
