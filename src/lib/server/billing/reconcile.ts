import { and, eq, isNotNull, isNull, lt, sql } from 'drizzle-orm';
import type { Logger } from 'pino';
import type { Database } from '../db';
import { billingCursor, billingCustomers, checkouts } from '../db/schema';
import { withCustomer } from './customers';
import { fulfilCheckout } from './fulfil';
import { databaseTime } from './standing';
import { instantOf, stripe } from './stripe';
import { syncSubscription } from './sync';
import { keepEvent } from './webhook';

/* The daily comparison with the payment service: what no event told, or none that arrived. */

const cursorName = 'events';
/** The payment service lists events for thirty days; some overlap costs nothing, since each is followed once. */
const firstLookBackDays = 29;
const overlapSeconds = 3600;
const onItsWaySeconds = 300;

export interface Mended {
	/** Events that had never arrived, now in the queue. */
	events: number;
	/** Subscriptions of which our copy was wrong. */
	subscriptions: number;
	/** Purchases that were still open here. */
	checkouts: number;
}

async function missedEvents(db: Database, log: Logger): Promise<number> {
	const now = await databaseTime(db);
	const [cursor] = await db.select().from(billingCursor).where(eq(billingCursor.name, cursorName));
	const from =
		cursor === undefined
			? now.getTime() / 1000 - firstLookBackDays * 86_400
			: cursor.readUntil.getTime() / 1000 - overlapSeconds;
	// What was made just now may be on its way.
	const until = now.getTime() / 1000 - onItsWaySeconds;
	let missed = 0;
	const created = { gte: Math.floor(from), lt: Math.floor(until) };
	for await (const event of stripe().events.list({ created, limit: 100 })) {
		if ((await keepEvent(event, db)) !== 'kept') continue;
		missed += 1;
		log.warn({ event: event.id, type: event.type }, 'an event of the payment service had never arrived');
	}
	const readUntil = instantOf(until);
	await db
		.insert(billingCursor)
		.values({ name: cursorName, readUntil })
		.onConflictDoUpdate({ target: billingCursor.name, set: { readUntil, checkedAt: sql`now()` } });
	return missed;
}

async function differingSubscriptions(db: Database, log: Logger): Promise<number> {
	const customers = await db.select().from(billingCustomers).where(isNull(billingCustomers.deletedAt));
	let mended = 0;
	for (const { customerId } of customers) {
		for await (const { id } of stripe().subscriptions.list({
			customer: customerId,
			status: 'all',
			limit: 100
		})) {
			const changed = await withCustomer(db, customerId, (tx, organisationId) =>
				syncSubscription(tx, organisationId, customerId, id)
			);
			if (!changed) continue;
			mended += 1;
			log.warn({ subscription: id }, 'our copy of a subscription was wrong and is mended');
		}
	}
	return mended;
}

async function forgottenCheckouts(db: Database, log: Logger): Promise<number> {
	const open = await db
		.select()
		.from(checkouts)
		.where(
			and(
				eq(checkouts.state, 'open'),
				isNotNull(checkouts.sessionId),
				lt(checkouts.startedAt, sql`now() - interval '1 hour'`)
			)
		);
	let mended = 0;
	for (const { id, sessionId } of open) {
		const outcome = await fulfilCheckout(sessionId ?? '', { db });
		if (outcome === 'open' || outcome === 'waiting') continue;
		mended += 1;
		log.warn({ checkout: id, outcome }, 'a purchase was still open here and is settled');
	}
	return mended;
}

/** Compares our copies with the payment service, mends them and logs each difference. */
export async function reconcile(db: Database, log: Logger): Promise<Mended> {
	// Subscriptions first: an event that arrives late finds its change made and counts as none.
	const subscriptions = await differingSubscriptions(db, log);
	const checkoutsMended = await forgottenCheckouts(db, log);
	const events = await missedEvents(db, log);
	return { events, subscriptions, checkouts: checkoutsMended };
}
