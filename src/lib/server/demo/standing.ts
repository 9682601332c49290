import { and, eq, sql } from 'drizzle-orm';
import type { Membership } from '../access/membership';
import { ensureCatalogue, priceOf } from '../billing/catalogue';
import { ensureCustomer, withCustomer } from '../billing/customers';
import { planById, plans, seatLookupKey } from '../billing/plans';
import { stripe } from '../billing/stripe';
import { syncSubscription } from '../billing/sync';
import type { Database } from '../db';
import { invitations, subscriptions } from '../db/schema';
import { inviteMember } from '../organisations/invitations/invite';
import type { DemoOrganisation } from './content/organisations';

/* How the demo's organisations stand with the payment service, and whom they have invited. */

/**
 * Subscribes an organisation of the demo with the payment service's test card, once. Only a test key lets that card
 * through.
 */
export async function ensurePlan(
	membership: Membership,
	wanted: NonNullable<DemoOrganisation['plan']>,
	db: Database
): Promise<void> {
	const { organisationId } = membership;
	const present = await db.$count(subscriptions, eq(subscriptions.organisationId, organisationId));
	if (present > 0) return;
	const plan = planById(wanted.id);
	if (plan === undefined) throw new Error(`The demo names a plan that is not there: ${wanted.id}.`);
	await ensureCatalogue(stripe(), plans());
	const price = await priceOf(stripe(), seatLookupKey(plan, wanted.interval), plans());
	const customer = await ensureCustomer(organisationId, db);
	const card = await stripe().paymentMethods.attach(
		'pm_card_visa',
		{ customer },
		{ idempotencyKey: `demo-card:${organisationId}` }
	);
	await stripe().customers.update(customer, { invoice_settings: { default_payment_method: card.id } });
	const subscription = await stripe().subscriptions.create(
		{
			customer,
			items: [{ price: price.id, quantity: wanted.seats }],
			cancel_at_period_end: wanted.cancelled,
			payment_behavior: 'error_if_incomplete',
			metadata: { organisation: organisationId }
		},
		{ idempotencyKey: `demo-plan:${organisationId}` }
	);
	await withCustomer(db, customer, (tx, id) => syncSubscription(tx, id, customer, subscription.id));
}

/** Invites somebody by mail, once. */
export async function ensureInvitation(
	membership: Membership,
	invited: NonNullable<DemoOrganisation['invited']>,
	db: Database
): Promise<void> {
	const present = await db.$count(
		invitations,
		and(
			eq(invitations.organisationId, membership.organisationId),
			eq(sql`lower(${invitations.email})`, invited.email)
		)
	);
	if (present === 0) await inviteMember(membership, invited, db);
}
