import { and, eq, sql } from 'drizzle-orm';
import type Stripe from 'stripe';
import type { Transaction } from '../db';
import { checkouts, exportDebits, exportGrants } from '../db/schema';
import { takenByRefund } from './ledger-rules';
import { lockOrganisation } from './standing';
import { idOf, stripe } from './stripe';

/*
 * Money returned for a pack takes back its part of the exports that are left. Money returned for a subscription changes
 * nothing by itself: whoever returns it ends the subscription as well, and that is what counts.
 */

/** Brings the ledger to what was returned on a charge, however often and in whatever order its events came. */
export async function applyRefunds(
	tx: Transaction,
	organisationId: string,
	customerId: string,
	chargeId: string
): Promise<void> {
	const charge = await stripe().charges.retrieve(chargeId);
	if (idOf(charge.customer) !== customerId) return;
	await applyCharge(tx, organisationId, charge);
}

export async function applyCharge(
	tx: Transaction,
	organisationId: string,
	charge: Stripe.Charge
): Promise<void> {
	const paymentIntentId = idOf(charge.payment_intent);
	if (paymentIntentId === null) return;
	const [checkout] = await tx
		.select({ sessionId: checkouts.sessionId })
		.from(checkouts)
		.where(and(eq(checkouts.paymentIntentId, paymentIntentId), eq(checkouts.organisationId, organisationId)));
	if (checkout?.sessionId == null) return;
	await lockOrganisation(tx, organisationId);
	const [grant] = await tx
		.select({ id: exportGrants.id, amount: exportGrants.amount })
		.from(exportGrants)
		.where(
			and(eq(exportGrants.key, `pack:${checkout.sessionId}`), eq(exportGrants.organisationId, organisationId))
		);
	if (grant === undefined) return;
	const [sums] = await tx
		.select({
			used: sql<number>`coalesce(sum(${exportDebits.amount}) filter (where ${exportDebits.kind} = 'issue'), 0)::int`,
			returned: sql<number>`coalesce(sum(${exportDebits.amount}) filter (where ${exportDebits.kind} = 'refund'), 0)::int`,
			entries: sql<number>`count(*) filter (where ${exportDebits.kind} = 'refund')::int`
		})
		.from(exportDebits)
		.where(eq(exportDebits.grantId, grant.id));
	const { used = 0, returned = 0, entries = 0 } = sums ?? {};
	const money = { paid: charge.amount_captured, returned: charge.amount_refunded };
	const amount = takenByRefund(grant.amount, used, money) - returned;
	if (amount === 0) return;
	await tx.insert(exportDebits).values({
		organisationId,
		grantId: grant.id,
		kind: 'refund',
		key: `refund:${charge.id}:${entries + 1}`,
		amount
	});
}
