import { eq } from 'drizzle-orm';
import Stripe from 'stripe';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { memberships } from '../db/schema';
import { priceOf } from './catalogue';
import { livingSubscription } from './checkout';
import { withCustomer } from './customers';
import { planById, planForSeats, plans, seatLookupKey, type Interval, type Plan } from './plans';
import { requireSeats } from './purchase';
import { databaseTime, lockOrganisation, standingOf, type Subscription } from './standing';
import { orAway, stripe } from './stripe';
import { syncSubscription } from './sync';

/* The number of seats of a living subscription. The plan follows from it: see plans.json. */

interface Change {
	subscription: Subscription;
	before: Plan | undefined;
	after: Plan;
	interval: Interval;
	items: { id: string; price: string; quantity: number }[];
	/**
	 * Further seats are charged from today on: on the next invoice of a monthly plan; at once on a yearly one, where
	 * they would otherwise be used for up to a year before they are paid for. Fewer seats count at once, and nothing is
	 * paid back for the running period: their exports of this month were given in full.
	 */
	proration: 'create_prorations' | 'always_invoice' | 'none';
}

function prorationOf(added: boolean, interval: Interval): Change['proration'] {
	if (!added) return 'none';
	return interval === 'year' ? 'always_invoice' : 'create_prorations';
}

async function planChange(organisationId: string, seats: number, db: Database): Promise<Change> {
	const subscription = await livingSubscription(organisationId, db);
	const { access } = await standingOf(organisationId, db);
	if (subscription === undefined || subscription.interval === null) {
		throw new ConflictError('There is no plan whose seats could be changed. Choose a plan first.');
	}
	if (access?.standing !== 'good') {
		throw new ConflictError('Seats can be changed once the open invoice is paid.');
	}
	if (subscription.cancelAtPeriodEnd) {
		throw new ConflictError(
			'The plan is cancelled. Take the cancellation back in the customer portal first.'
		);
	}
	const after = Number.isInteger(seats) ? planForSeats(seats, plans()) : undefined;
	if (after === undefined) {
		const most = Math.max(...plans().plans.map((plan) => plan.seats.to));
		throw new InvalidInputError('This number of seats cannot be had.', {
			seats: `Give a whole number between 1 and ${most}.`
		});
	}
	if (seats === subscription.quantity) {
		throw new InvalidInputError('Nothing changes.', { seats: `There are ${seats} seats already.` });
	}
	const taken = await db.$count(memberships, eq(memberships.organisationId, organisationId));
	requireSeats(after, seats, taken, plans());
	const price = await orAway(priceOf(stripe(), seatLookupKey(after, subscription.interval), plans()));
	return {
		subscription,
		before: planById(subscription.planId),
		after,
		interval: subscription.interval,
		items: [{ id: subscription.itemId, price: price.id, quantity: seats }],
		proration: prorationOf(seats > subscription.quantity, subscription.interval)
	};
}

export interface SeatPreview {
	from: { seats: number; plan: string };
	to: { seats: number; plan: string };
	interval: Interval;
	/** What the change itself costs for the rest of the running period; 0 for fewer seats. */
	now: number;
	/** Whether that is charged when the change is made, and not with the next invoice. */
	atOnce: boolean;
	/** Total of the next regular invoice, with what waits for it. */
	next: number;
	nextAt: Date;
	/** What every further period costs. */
	each: number;
	currency: string;
}

const isProration = ({ parent }: Stripe.InvoiceLineItem) =>
	parent?.subscription_item_details?.proration === true || parent?.invoice_item_details?.proration === true;

/** What a change of seats will cost, from the payment service's own preview. @throws like `changeSeats` */
export async function previewSeats(
	membership: Membership | null,
	seats: number,
	db: Database = database()
): Promise<SeatPreview> {
	requireAction(membership, 'billing.manage');
	const { subscription, before, after, interval, items, proration } = await planChange(
		membership.organisationId,
		seats,
		db
	);
	await limit(`seats-preview:${membership.organisationId}`, 60, 3600, db);
	const changedAt = Math.floor((await databaseTime(db)).getTime() / 1000);
	const invoice = await orAway(
		stripe().invoices.createPreview({
			customer: subscription.customerId,
			subscription: subscription.id,
			subscription_details: {
				items,
				proration_behavior: proration,
				...(proration === 'none' ? {} : { proration_date: changedAt })
			}
		})
	);
	// Earlier changes wait for the same invoice; this one's lines begin at its own instant.
	const ofThis = (line: Stripe.InvoiceLineItem) =>
		proration !== 'none' && isProration(line) && line.period.start === changedAt;
	const atOnce = proration === 'always_invoice';
	const each = after.seatPrice[interval] * seats;
	return {
		from: { seats: subscription.quantity, plan: before?.name ?? 'unknown' },
		to: { seats, plan: after.name },
		interval,
		now: invoice.lines.data.filter(ofThis).reduce((sum, { amount }) => sum + amount, 0),
		atOnce,
		// What is charged at once leaves nothing to wait for the renewal.
		next: atOnce ? each : invoice.total,
		nextAt: subscription.periodEnd,
		each,
		currency: invoice.currency
	};
}

/**
 * Sets the number of seats, with the plan that it belongs to.
 * @param mark names this one decision, so that sending its form twice is one change
 * @throws InvalidInputError for a number that no plan has or the members do not fit in; ConflictError while there is no
 * plan, or one that is cancelled or owes, and where the card is declined
 */
export async function changeSeats(
	membership: Membership | null,
	seats: number,
	mark: string,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'billing.manage');
	const { organisationId } = membership;
	// The same form sent twice.
	if ((await livingSubscription(organisationId, db))?.quantity === seats) return;
	const { subscription, after, items, proration } = await planChange(organisationId, seats, db);
	await limit(`seats:${organisationId}`, 20, 3600, db);
	const change = withCustomer(db, subscription.customerId, async (tx) => {
		// Whoever takes a seat holds the same row: nobody comes in between the count and the change.
		await lockOrganisation(tx, organisationId);
		const taken = await tx.$count(memberships, eq(memberships.organisationId, organisationId));
		requireSeats(after, seats, taken, plans());
		await stripe().subscriptions.update(
			subscription.id,
			{
				items,
				proration_behavior: proration,
				// A card that is declined leaves everything as it was.
				...(proration === 'always_invoice' ? { payment_behavior: 'error_if_incomplete' as const } : {})
			},
			{ idempotencyKey: `seats:${organisationId}:${mark}:${seats}` }
		);
		await syncSubscription(tx, organisationId, subscription.customerId, subscription.id);
		await recordAudit(tx, membership, 'billing.seats', subscription.id, {
			from: subscription.quantity,
			to: seats,
			plan: after.id
		});
	});
	await orAway(change).catch((cause: unknown) => {
		if (!(cause instanceof Stripe.errors.StripeCardError)) throw cause;
		throw new ConflictError(
			'The card was declined, so nothing was changed and nothing was paid. Change the card in the customer portal, then try again.'
		);
	});
}
