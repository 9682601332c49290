import type Stripe from 'stripe';
import { database, type Database } from '../db';
import { billingEvents } from '../db/schema';
import { env } from '../env';
import { enqueue } from '../jobs/queue';
import { log } from '../log';
import { RefusedEventError } from './errors';
import { apiVersion, idOf, instantOf, isLive, stripe } from './stripe';

/* The door for the payment service's events: who knocks is checked, what they say is only noted, the queue looks. */

/** Longest time between signing and arriving, seconds. */
const tolerance = 300;
/** How far ahead of ours the sender's clock may be, seconds. The library itself takes any date in the future. */
const ahead = 60;

/** Events that something follows from; others are answered and forgotten. */
export function isOfInterest(type: string): boolean {
	return (
		type.startsWith('checkout.session.') ||
		type.startsWith('customer.subscription.') ||
		(type.startsWith('invoice.') && type !== 'invoice.upcoming') ||
		type.startsWith('refund.') ||
		type === 'charge.refunded' ||
		type === 'charge.refund.updated' ||
		type === 'customer.deleted'
	);
}

/** @throws RefusedEventError for a signature that is wrong, old, or from the future */
function verified(body: string, signature: string | null): Stripe.Event {
	if (signature === null) throw new RefusedEventError('The event is not signed.');
	const stamp = /(?:^|,)\s*t=(\d{1,12})(?:,|$)/.exec(signature)?.[1];
	if (stamp === undefined) throw new RefusedEventError('The event’s signature has no time.');
	if (Number(stamp) > Date.now() / 1000 + ahead)
		throw new RefusedEventError('The event is dated in the future.');
	for (const secret of env().STRIPE_WEBHOOK_SECRET.split(',')) {
		try {
			return stripe().webhooks.constructEvent(body, signature, secret, tolerance);
		} catch {
			// Another of the secrets may be the one; what is wrong with each is nobody's business outside.
		}
	}
	throw new RefusedEventError('The event’s signature does not match.');
}

/** The customer that an event is about, where its object says so; only a hint for whoever looks into the inbox. */
function customerIn(event: Stripe.Event): string | null {
	const object = event.data.object as {
		object?: string;
		id?: string;
		customer?: string | { id: string } | null;
	};
	return object.object === 'customer' ? (object.id ?? null) : idOf(object.customer);
}

/**
 * Checks an event and notes it, once, together with the job that will work it off. Returns only after that is kept.
 * @param body the bytes as they came, as text; read as JSON only once their signature is found right
 * @throws RefusedEventError for one that is not signed, not of these minutes, or not meant for this service
 */
export async function receiveEvent(
	body: string,
	signature: string | null,
	db: Database = database()
): Promise<'kept' | 'known' | 'not of interest'> {
	const event = verified(body, signature);
	if (event.livemode !== isLive()) {
		throw new RefusedEventError('The event is of the other mode: test and live do not mix.');
	}
	if (event.account) throw new RefusedEventError('The event is of another account.');
	if (event.api_version !== apiVersion) {
		log.error({ event: event.id, version: event.api_version }, `the webhook must be set to ${apiVersion}`);
		throw new RefusedEventError(`The event is not of version ${apiVersion}.`);
	}
	return keepEvent(event, db);
}

/** Notes an event, once, together with the job that follows it. */
export async function keepEvent(
	event: Stripe.Event,
	db: Database
): Promise<'kept' | 'known' | 'not of interest'> {
	const { id: objectId } = event.data.object as { id?: string };
	if (!isOfInterest(event.type) || objectId === undefined) return 'not of interest';
	return db.transaction(async (tx) => {
		const kept = await tx
			.insert(billingEvents)
			.values({
				id: event.id,
				type: event.type,
				objectId,
				customerId: customerIn(event),
				madeAt: instantOf(event.created)
			})
			.onConflictDoNothing()
			.returning({ id: billingEvents.id });
		if (kept.length === 0) return 'known';
		await enqueue(tx, 'billing-event', { eventId: event.id });
		return 'kept';
	});
}
