import { eq, sql } from 'drizzle-orm';
import type Stripe from 'stripe';
import type { Transaction } from '../db';
import { auditEvents, invoices, subscriptions } from '../db/schema';
import { log } from '../log';
import { invoiceRow, subscriptionOfInvoice, subscriptionRow, type SubscriptionRow } from './copies';
import { terminalStatuses } from './entitlement';
import { enterMonth } from './ledger';
import { plans } from './plans';
import { idOf, isMissing, stripe } from './stripe';

/*
 * Brings our copies up to what the payment service says now. An event only says what to look at: its content may be
 * old, and events come in any order. Call these within `withCustomer`.
 */

const watched = ['status', 'planId', 'interval', 'quantity', 'cancelAtPeriodEnd'] as const;

/** Every line of an invoice: the answer itself holds the first few. */
async function withAllLines(invoice: Stripe.Invoice): Promise<Stripe.Invoice> {
	if (!invoice.lines.has_more) return invoice;
	const lines = await stripe().invoices.listLineItems(invoice.id, { limit: 100 });
	return { ...invoice, lines: { ...invoice.lines, data: lines.data } };
}

async function keepInvoice(tx: Transaction, organisationId: string, fetched: Stripe.Invoice): Promise<void> {
	const row = invoiceRow(organisationId, fetched);
	await tx
		.insert(invoices)
		.values(row)
		.onConflictDoUpdate({
			target: invoices.id,
			set: { ...row, fetchedAt: sql`now()` },
			setWhere: eq(invoices.organisationId, organisationId)
		});
}

async function keepSubscription(tx: Transaction, row: SubscriptionRow): Promise<boolean> {
	const [before] = await tx.select().from(subscriptions).where(eq(subscriptions.id, row.id));
	if (before !== undefined && before.organisationId !== row.organisationId) {
		throw new Error(`Subscription ${row.id} belongs to another organisation.`);
	}
	if (before !== undefined && terminalStatuses.has(before.status) && !terminalStatuses.has(row.status)) {
		log.warn({ subscription: row.id, status: row.status }, 'a subscription that is over stays over');
		return false;
	}
	await tx
		.insert(subscriptions)
		.values(row)
		.onConflictDoUpdate({ target: subscriptions.id, set: { ...row, fetchedAt: sql`now()` } });
	const changed = before === undefined || watched.some((name) => before[name] !== row[name]);
	if (changed) {
		const detail = Object.fromEntries(watched.map((name) => [name, row[name] ?? null]));
		await tx.insert(auditEvents).values({
			organisationId: row.organisationId,
			action: 'billing.subscription',
			subject: row.id,
			detail
		});
	}
	return changed || before.paidUntil?.getTime() !== row.paidUntil?.getTime();
}

/**
 * @param customerId the customer that is held: a subscription of another one is left alone
 * @returns whether our copy was different
 */
export async function syncSubscription(
	tx: Transaction,
	organisationId: string,
	customerId: string,
	subscriptionId: string
): Promise<boolean> {
	const fetched = await stripe().subscriptions.retrieve(subscriptionId);
	if (idOf(fetched.customer) !== customerId) {
		throw new Error(`Subscription ${subscriptionId} is not one of this customer.`);
	}
	const page = await stripe().invoices.list({ subscription: subscriptionId, limit: 100 });
	const all = await Promise.all(page.data.map(withAllLines));
	for (const invoice of all) await keepInvoice(tx, organisationId, invoice);
	const row = subscriptionRow(organisationId, fetched, all, plans());
	if (row === null) return false;
	const changed = await keepSubscription(tx, row);
	await enterMonth(tx, organisationId);
	return changed;
}

export async function syncInvoice(
	tx: Transaction,
	organisationId: string,
	customerId: string,
	invoiceId: string
): Promise<void> {
	let fetched: Stripe.Invoice;
	try {
		fetched = await stripe().invoices.retrieve(invoiceId);
	} catch (cause) {
		if (!isMissing(cause)) throw cause;
		// A draft that was thrown away.
		await tx.delete(invoices).where(eq(invoices.id, invoiceId));
		return;
	}
	if (idOf(fetched.customer) !== customerId) return;
	await keepInvoice(tx, organisationId, fetched);
	const subscriptionId = subscriptionOfInvoice(fetched);
	if (subscriptionId !== null) await syncSubscription(tx, organisationId, customerId, subscriptionId);
}
