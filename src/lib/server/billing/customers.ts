import { and, eq, isNull } from 'drizzle-orm';
import type { Database, Queryable, Transaction } from '../db';
import { billingCustomers, organisations } from '../db/schema';
import { stripe } from './stripe';

/* Whose customer is whose: by ids that both sides keep. No address of a person says who an organisation is. */

/** The customer of an organisation; null before its first purchase. */
export async function customerOf(organisationId: string, db: Queryable): Promise<string | null> {
	const [row] = await db
		.select({ customerId: billingCustomers.customerId })
		.from(billingCustomers)
		.where(and(eq(billingCustomers.organisationId, organisationId), isNull(billingCustomers.deletedAt)));
	return row?.customerId ?? null;
}

/** The same, made where there is none: once, also when asked for twice at the same moment or after a crash. */
export async function ensureCustomer(organisationId: string, db: Database): Promise<string> {
	const [row] = await db
		.select({
			name: organisations.name,
			before: billingCustomers.customerId,
			deletedAt: billingCustomers.deletedAt
		})
		.from(organisations)
		.leftJoin(billingCustomers, eq(billingCustomers.organisationId, organisations.id))
		.where(eq(organisations.id, organisationId));
	if (row === undefined) throw new Error('There is no such organisation.');
	if (row.before !== null && row.deletedAt === null) return row.before;
	const { id } = await stripe().customers.create(
		{ name: row.name, metadata: { organisation: organisationId } },
		{ idempotencyKey: `customer:${organisationId}:${row.before ?? 'first'}` }
	);
	await db
		.insert(billingCustomers)
		.values({ organisationId, customerId: id })
		.onConflictDoUpdate({
			target: billingCustomers.organisationId,
			set: { customerId: id, deletedAt: null }
		});
	return id;
}

/**
 * Runs work on a customer's copies while nobody else does, so that what is fetched last is written last. The payment
 * service is asked within it: its answer must not be older than the lock.
 * @returns undefined for a customer that is none of ours
 */
export async function withCustomer<T>(
	db: Database,
	customerId: string,
	work: (tx: Transaction, organisationId: string) => Promise<T>
): Promise<T | undefined> {
	return db.transaction(async (tx) => {
		const [row] = await tx
			.select({ organisationId: billingCustomers.organisationId })
			.from(billingCustomers)
			.where(eq(billingCustomers.customerId, customerId))
			.for('update');
		return row === undefined ? undefined : work(tx, row.organisationId);
	});
}
