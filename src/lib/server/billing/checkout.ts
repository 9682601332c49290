import { and, eq } from 'drizzle-orm';
import Stripe from 'stripe';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { database, type Database, type Transaction } from '../db';
import { checkouts } from '../db/schema';
import { env } from '../env';
import { priceOf } from './catalogue';
import { ensureCustomer } from './customers';
import { terminalStatuses } from './entitlement';
import { fulfilCheckout } from './fulfil';
import { requirePaymentPage } from './payment-page';
import { planById, plans } from './plans';
import { quote, readPurchase, type Purchase, type PurchaseInput } from './purchase';
import { seatsOf } from './seats';
import { lockOrganisation, standingOf } from './standing';
import { orAway, stripe } from './stripe';

type Checkout = typeof checkouts.$inferSelect;

const alreadySubscribed =
	'This organisation already has a plan. Change its seats on the billing page; card, address and cancellation are in the customer portal.';

/** A subscription that is not over: a second one would be paid for twice. */
export async function livingSubscription(organisationId: string, tx: Transaction | Database) {
	const { subscription } = await standingOf(organisationId, tx);
	return subscription !== undefined && !terminalStatuses.has(subscription.status) ? subscription : undefined;
}

/** The purchase that a kept row stands for. */
function purchaseIn(row: Checkout): Purchase {
	const { kind, planId, interval, quantity } = row;
	if (kind === 'pack') return { kind, plan: null, interval: null, quantity };
	const plan = planById(planId);
	if (plan === undefined || interval === null)
		throw new Error('The plan of this purchase is not offered any more.');
	return { kind, plan, interval, quantity };
}

const isSame = (row: Checkout, wanted: Purchase) =>
	row.kind === wanted.kind &&
	row.planId === (wanted.plan?.id ?? null) &&
	row.interval === wanted.interval &&
	row.quantity === wanted.quantity;

/**
 * The session of a purchase at the payment service. The row's id is its idempotency key: after a crash, a lost answer
 * or a second click it is the same session.
 */
async function sessionOf(row: Checkout, db: Database): Promise<Stripe.Checkout.Session> {
	if (row.sessionId !== null) return stripe().checkout.sessions.retrieve(row.sessionId);
	const purchase = purchaseIn(row);
	const customer = await ensureCustomer(row.organisationId, db);
	const price = await priceOf(stripe(), quote(purchase, plans()).lookupKey, plans());
	const metadata = { organisation: row.organisationId, checkout: row.id };
	const { ORIGIN } = env();
	const common: Stripe.Checkout.SessionCreateParams = {
		customer,
		client_reference_id: row.organisationId,
		line_items: [{ price: price.id, quantity: row.quantity }],
		metadata,
		success_url: `${ORIGIN}/billing/return?session={CHECKOUT_SESSION_ID}`,
		cancel_url: `${ORIGIN}/billing`
	};
	const session = await stripe().checkout.sessions.create(
		purchase.kind === 'subscription'
			? { ...common, mode: 'subscription', subscription_data: { metadata } }
			: {
					...common,
					mode: 'payment',
					payment_intent_data: { metadata }
				},
		{ idempotencyKey: `checkout:${row.id}` }
	);
	await db.update(checkouts).set({ sessionId: session.id }).where(eq(checkouts.id, row.id));
	return session;
}

async function end(row: Checkout, state: 'expired' | 'failed', db: Database): Promise<void> {
	await db
		.update(checkouts)
		.set({ state })
		.where(and(eq(checkouts.id, row.id), eq(checkouts.state, 'open')));
}

/**
 * The purchase's row: a new one, or the organisation's open one of a plan. A person who comes back with another choice
 * finds the earlier one ended first, so that two plans can never both be paid for.
 */
async function rowFor(
	membership: Membership,
	wanted: Purchase,
	db: Database
): Promise<{ row: Checkout; isOther: boolean }> {
	return db.transaction(async (tx) => {
		await lockOrganisation(tx, membership.organisationId);
		if (wanted.kind === 'subscription') {
			if ((await livingSubscription(membership.organisationId, tx)) !== undefined) {
				throw new ConflictError(alreadySubscribed);
			}
			const [open] = await tx
				.select()
				.from(checkouts)
				.where(
					and(
						eq(checkouts.organisationId, membership.organisationId),
						eq(checkouts.kind, 'subscription'),
						eq(checkouts.state, 'open')
					)
				);
			if (open !== undefined) return { row: open, isOther: !isSame(open, wanted) };
		}
		const { kind, plan, interval, quantity } = wanted;
		const [row] = await tx
			.insert(checkouts)
			.values({
				organisationId: membership.organisationId,
				kind,
				planId: plan?.id ?? null,
				interval,
				quantity,
				startedBy: membership.userId
			})
			.returning();
		if (row === undefined) throw new Error('The purchase was not stored.');
		await recordAudit(tx, membership, 'billing.checkout', row.id, { kind, plan: plan?.id ?? null, quantity });
		return { row, isOther: false };
	});
}

/**
 * Starts a purchase.
 * @returns the address of the payment service's page where it is paid
 * @throws InvalidInputError for seats that do not fit, ConflictError where there is a plan already, PaymentsAwayError
 */
export async function startCheckout(
	membership: Membership | null,
	input: PurchaseInput,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'billing.manage');
	const { taken } = await seatsOf(membership.organisationId, db);
	const wanted = readPurchase(input, taken, plans());
	await limit(`checkout:${membership.organisationId}`, 30, 3600, db);
	return orAway(leadToPayment(membership, wanted, db));
}

async function leadToPayment(membership: Membership, wanted: Purchase, db: Database): Promise<string> {
	for (let tries = 0; tries < 4; tries++) {
		const { row, isOther } = await rowFor(membership, wanted, db);
		let session: Stripe.Checkout.Session;
		try {
			session = await sessionOf(row, db);
		} catch (cause) {
			// Its price was replaced since it was begun: a new purchase takes the new one.
			const isStale = cause instanceof Stripe.errors.StripeIdempotencyError;
			// An answer of theirs that says no more is kept under the key and would come again for a day; without an
			// answer the key stays, since the session may be there.
			const isSpoilt = cause instanceof Stripe.errors.StripeAPIError && (cause.statusCode ?? 0) >= 500;
			if (isStale || isSpoilt) await end(row, 'failed', db);
			if (!isStale) throw cause;
			continue;
		}
		if (session.status === 'complete') {
			const outcome = await fulfilCheckout(session.id, { db });
			if (outcome === 'waiting')
				throw new ConflictError('A purchase is being paid: its money is not in yet.');
			if (wanted.kind === 'subscription') throw new ConflictError(alreadySubscribed);
			continue;
		}
		if (session.status === 'open' && !isOther) return requirePaymentPage(session.url);
		if (session.status === 'open') await stripe().checkout.sessions.expire(session.id);
		await end(row, 'expired', db);
	}
	throw new ConflictError('Another purchase was begun at this moment. Please try again.');
}

export interface Review {
	purchase: Purchase;
	each: number;
	total: number;
	currency: string;
}

/** What a purchase comes to, shown before anything is begun. @throws like `startCheckout` */
export async function reviewPurchase(
	membership: Membership | null,
	input: PurchaseInput,
	db: Database = database()
): Promise<Review> {
	requireAction(membership, 'billing.manage');
	const { taken } = await seatsOf(membership.organisationId, db);
	const purchase = readPurchase(input, taken, plans());
	if (purchase.kind === 'subscription' && (await livingSubscription(membership.organisationId, db))) {
		throw new ConflictError(alreadySubscribed);
	}
	const { each, total, currency } = quote(purchase, plans());
	return { purchase, each, total, currency };
}
