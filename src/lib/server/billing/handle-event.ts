import { eq, sql } from 'drizzle-orm';
import type { Database } from '../db';
import { billingCustomers, billingEvents, subscriptions } from '../db/schema';
import { withCustomer } from './customers';
import { fulfilCheckout } from './fulfil';
import { applyRefunds } from './refunds';
import { idOf, isMissing, stripe } from './stripe';
import { syncInvoice, syncSubscription } from './sync';

export type InboxEvent = typeof billingEvents.$inferSelect;

const strange = 'It is about a customer that is none of ours.';

/** Why an event was laid aside; null where it was followed. */
type Aside = string | null;

async function ofCustomer(
	db: Database,
	reference: Parameters<typeof idOf>[0],
	work: Parameters<typeof withCustomer<unknown>>[2]
): Promise<Aside> {
	const customerId = idOf(reference);
	if (customerId === null) return strange;
	const found = await withCustomer(db, customerId, async (tx, organisationId) => {
		await work(tx, organisationId);
		return true;
	});
	return found === undefined ? strange : null;
}

async function subscriptionChanged(db: Database, id: string): Promise<Aside> {
	const { customer } = await stripe().subscriptions.retrieve(id);
	return ofCustomer(db, customer, (tx, organisationId) =>
		syncSubscription(tx, organisationId, idOf(customer) ?? '', id)
	);
}

async function invoiceChanged(db: Database, id: string, hint: string | null): Promise<Aside> {
	let customer: Parameters<typeof idOf>[0] = hint;
	try {
		customer = (await stripe().invoices.retrieve(id)).customer;
	} catch (cause) {
		if (!isMissing(cause)) throw cause;
	}
	return ofCustomer(db, customer, (tx, organisationId) =>
		syncInvoice(tx, organisationId, idOf(customer) ?? '', id)
	);
}

async function chargeRefunded(db: Database, id: string): Promise<Aside> {
	const { customer } = await stripe().charges.retrieve(id);
	return ofCustomer(db, customer, (tx, organisationId) =>
		applyRefunds(tx, organisationId, idOf(customer) ?? '', id)
	);
}

async function customerDeleted(db: Database, id: string): Promise<Aside> {
	const fetched = await stripe().customers.retrieve(id);
	if (!fetched.deleted) return null;
	return ofCustomer(db, id, async (tx, organisationId) => {
		await tx
			.update(billingCustomers)
			.set({ deletedAt: sql`coalesce(${billingCustomers.deletedAt}, now())` })
			.where(eq(billingCustomers.customerId, id));
		const own = await tx
			.select({ id: subscriptions.id })
			.from(subscriptions)
			.where(eq(subscriptions.customerId, id));
		for (const subscription of own) await syncSubscription(tx, organisationId, id, subscription.id);
	});
}

/**
 * Follows an event: looks at the payment service for what it is about and brings our copy up to it. Bears being run
 * twice and in any order.
 * @returns why it was laid aside, or null
 */
export async function followEvent(db: Database, event: InboxEvent): Promise<Aside> {
	const { type, objectId, customerId } = event;
	if (type.startsWith('checkout.session.')) {
		const failed = type === 'checkout.session.async_payment_failed';
		const outcome = await fulfilCheckout(objectId, { failed, db });
		return outcome === 'unknown' ? 'It is about a purchase that is none of ours.' : null;
	}
	if (type.startsWith('customer.subscription.')) return subscriptionChanged(db, objectId);
	if (type.startsWith('invoice.')) return invoiceChanged(db, objectId, customerId);
	if (type === 'charge.refunded') return chargeRefunded(db, objectId);
	if (type.startsWith('refund.') || type === 'charge.refund.updated') {
		const charge = idOf((await stripe().refunds.retrieve(objectId)).charge);
		return charge === null ? 'It is about money that came by no charge.' : chargeRefunded(db, charge);
	}
	if (type === 'customer.deleted') return customerDeleted(db, objectId);
	return 'Nothing follows from events of this type.';
}
