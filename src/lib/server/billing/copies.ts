import type Stripe from 'stripe';
import type { subscriptions, invoices } from '../db/schema';
import { planOfPrice } from './catalogue';
import type { Plans } from './plans';
import { idOf, instantOf } from './stripe';

/* What the payment service says, as the rows that we keep of it. Pure. */

export type SubscriptionRow = typeof subscriptions.$inferInsert;
export type InvoiceRow = typeof invoices.$inferInsert;

/** The subscription that an invoice is for; null for a purchase of its own. */
export function subscriptionOfInvoice(invoice: Stripe.Invoice): string | null {
	return idOf(invoice.parent?.subscription_details?.subscription);
}

/** Reasons of invoices that pay for a whole period. */
const periodReasons: ReadonlySet<string> = new Set([
	'subscription_create',
	'subscription_cycle',
	// Another interval is billed at once, with a line for the whole new period.
	'subscription_update'
]);

/**
 * End of the last period that paid invoices of a subscription cover: lines of its own items only, and none that
 * merely settles a change within a period.
 */
export function paidUntilOf(subscriptionId: string, all: readonly Stripe.Invoice[]): Date | null {
	const ends = all
		.filter(
			(invoice) =>
				invoice.status === 'paid' &&
				subscriptionOfInvoice(invoice) === subscriptionId &&
				periodReasons.has(invoice.billing_reason ?? '')
		)
		.flatMap(({ lines }) => lines.data)
		.filter(({ parent }) => {
			const item = parent?.subscription_item_details;
			return item != null && !item.proration && item.subscription === subscriptionId;
		})
		.map(({ period }) => period.end);
	return ends.length === 0 ? null : instantOf(Math.max(...ends));
}

/** @returns null for a subscription without an item, which entitles to nothing */
export function subscriptionRow(
	organisationId: string,
	fetched: Stripe.Subscription,
	paid: readonly Stripe.Invoice[],
	plans: Plans
): SubscriptionRow | null {
	const ours = fetched.items.data.find(({ price }) => planOfPrice(price, plans) !== null);
	const item = ours ?? fetched.items.data[0];
	const customerId = idOf(fetched.customer);
	if (item === undefined || customerId === null) return null;
	const plan = planOfPrice(item.price, plans);
	const { current_period_start: start, current_period_end: end } = item;
	const paidUntil = paidUntilOf(fetched.id, paid);
	const ends = fetched.cancel_at_period_end || (fetched.cancel_at !== null && fetched.cancel_at <= end);
	return {
		id: fetched.id,
		organisationId,
		customerId,
		status: fetched.status,
		planId: plan?.planId ?? null,
		interval: plan?.interval ?? null,
		priceId: item.price.id,
		itemId: item.id,
		quantity: item.quantity ?? 0,
		startedAt: instantOf(fetched.start_date),
		anchor: instantOf(fetched.billing_cycle_anchor),
		periodStart: instantOf(start),
		periodEnd: instantOf(end),
		// A longer period that was paid for and then exchanged for a shorter one does not go on covering.
		paidUntil: paidUntil === null ? null : new Date(Math.min(paidUntil.getTime(), end * 1000)),
		cancelAtPeriodEnd: ends,
		endedAt: fetched.ended_at === null ? null : instantOf(fetched.ended_at)
	};
}

export function invoiceRow(organisationId: string, fetched: Stripe.Invoice): InvoiceRow {
	return {
		id: fetched.id,
		organisationId,
		subscriptionId: subscriptionOfInvoice(fetched),
		number: fetched.number,
		status: fetched.status ?? 'unknown',
		billingReason: fetched.billing_reason,
		total: fetched.total,
		amountDue: fetched.amount_remaining,
		currency: fetched.currency,
		hostedUrl: fetched.hosted_invoice_url ?? null,
		pdfUrl: fetched.invoice_pdf ?? null,
		madeAt: instantOf(fetched.created)
	};
}
