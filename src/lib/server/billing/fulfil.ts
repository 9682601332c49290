import { eq } from 'drizzle-orm';
import type Stripe from 'stripe';
import { database, type Database, type Transaction } from '../db';
import { auditEvents, checkouts } from '../db/schema';
import { log } from '../log';
import { isPackPrice } from './catalogue';
import { withCustomer } from './customers';
import { grantPack } from './ledger';
import { applyCharge } from './refunds';
import { idOf, stripe } from './stripe';
import { syncSubscription } from './sync';

type Checkout = typeof checkouts.$inferSelect;

/** Where a purchase stands. */
export type Fulfilment =
	/** Paid, and given. */
	| 'done'
	/** Paid by a way that takes days; given when the money is in. */
	| 'waiting'
	/** Not finished at the payment service. */
	| 'open'
	/** Not paid in its time, or the payment failed. */
	| 'not-paid'
	/** No purchase of ours. */
	| 'unknown';

/**
 * Gives what was paid for: at the return of the buyer, at the payment service's event, at the daily comparison,
 * whichever comes first and however often. What counts is what the payment service says when asked, never that
 * somebody came back from its page.
 * @param only the organisation whose purchase it must be
 */
export async function fulfilCheckout(
	sessionId: string,
	{ only, failed = false, db = database() }: { only?: string; failed?: boolean; db?: Database } = {}
): Promise<Fulfilment> {
	const [known] = await db.select().from(checkouts).where(eq(checkouts.sessionId, sessionId));
	if (known === undefined || (only !== undefined && known.organisationId !== only)) return 'unknown';
	const session = await stripe().checkout.sessions.retrieve(sessionId, {
		expand: ['line_items', 'payment_intent.latest_charge']
	});
	const customerId = idOf(session.customer);
	if (customerId === null) return 'unknown';
	const outcome = await withCustomer(db, customerId, async (tx, organisationId) => {
		const [checkout] = await tx.select().from(checkouts).where(eq(checkouts.id, known.id)).for('update');
		if (checkout?.organisationId !== organisationId) return 'unknown' as const;
		return settle(tx, checkout, session, customerId, failed);
	});
	return outcome ?? 'unknown';
}

async function settle(
	tx: Transaction,
	checkout: Checkout,
	session: Stripe.Checkout.Session,
	customerId: string,
	failed: boolean
): Promise<Fulfilment> {
	const end = async (state: Checkout['state']) => {
		await tx.update(checkouts).set({ state }).where(eq(checkouts.id, checkout.id));
	};
	if (session.status === 'expired') {
		if (checkout.state === 'open') await end('expired');
		return 'not-paid';
	}
	if (session.status !== 'complete') return 'open';
	if (session.payment_status !== 'paid' && session.payment_status !== 'no_payment_required') {
		if (failed) await end('failed');
		return failed ? 'not-paid' : 'waiting';
	}
	if (checkout.kind === 'subscription') {
		const subscriptionId = idOf(session.subscription);
		if (subscriptionId === null) throw new Error(`Session ${session.id} is paid and has no subscription.`);
		// Fetched each time: the return and the event may both come before its first invoice is known here.
		await syncSubscription(tx, checkout.organisationId, customerId, subscriptionId);
	} else {
		await givePacks(tx, checkout, session);
	}
	if (checkout.state !== 'complete') {
		await end('complete');
		await tx.insert(auditEvents).values({
			organisationId: checkout.organisationId,
			userId: checkout.startedBy,
			action: 'billing.bought',
			subject: checkout.id,
			detail: { kind: checkout.kind, plan: checkout.planId, quantity: checkout.quantity }
		});
	}
	return 'done';
}

async function givePacks(
	tx: Transaction,
	checkout: Checkout,
	session: Stripe.Checkout.Session
): Promise<void> {
	const lines = session.line_items?.data ?? [];
	const packs = lines
		.filter(({ price }) => price !== null && isPackPrice(price))
		.reduce((sum, { quantity }) => sum + (quantity ?? 0), 0);
	if (packs === 0 || packs !== lines.reduce((sum, { quantity }) => sum + (quantity ?? 0), 0)) {
		log.error(
			{ checkout: checkout.id, session: session.id },
			'a paid session holds something else than packs'
		);
	}
	if (packs === 0) return;
	const paymentIntentId = idOf(session.payment_intent);
	await tx.update(checkouts).set({ paymentIntentId }).where(eq(checkouts.id, checkout.id));
	await grantPack(tx, checkout.organisationId, session.id, packs);
	// Money may have been returned before this was ever seen.
	const payment = session.payment_intent;
	const charge = payment !== null && typeof payment === 'object' ? payment.latest_charge : null;
	if (charge !== null && typeof charge === 'object') await applyCharge(tx, checkout.organisationId, charge);
}
