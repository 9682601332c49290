import { sql } from 'drizzle-orm';
import { boolean, index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts';
import { instant } from './columns';
import { organisations } from './organisations';
import { issues } from './reports';

/*
 * What the payment service knows and we keep a copy of, and the ledger of exports, which is ours. Plans are no table:
 * they are the data file of the billing folder. Statuses are text: an unknown one must be kept, and denies.
 */

/** The payment service's customer of an organisation; at most one. */
export const billingCustomers = pgTable(
	'billing_customers',
	{
		organisationId: uuid('organisation_id')
			.primaryKey()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		customerId: text('customer_id').notNull(),
		createdAt: instant('created_at').notNull().defaultNow(),
		/** Removed over there: the next purchase makes another one. */
		deletedAt: instant('deleted_at')
	},
	(t) => [uniqueIndex('billing_customers_customer').on(t.customerId)]
);

/** A subscription as last fetched. A canceled one never comes back to life. */
export const subscriptions = pgTable(
	'subscriptions',
	{
		/** The payment service's id. */
		id: text('id').primaryKey(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		customerId: text('customer_id').notNull(),
		status: text('status').notNull(),
		/** Plan of the data file; null where its price is none of ours, which denies. */
		planId: text('plan_id'),
		interval: text('interval', { enum: ['month', 'year'] }),
		priceId: text('price_id').notNull(),
		itemId: text('item_id').notNull(),
		/** Seats. */
		quantity: integer('quantity').notNull(),
		startedAt: instant('started_at').notNull(),
		/** What billing periods and months of exports are counted from. */
		anchor: instant('anchor').notNull(),
		periodStart: instant('period_start').notNull(),
		periodEnd: instant('period_end').notNull(),
		/** End of the last period that a paid invoice of this subscription covers. */
		paidUntil: instant('paid_until'),
		cancelAtPeriodEnd: boolean('cancel_at_period_end').notNull().default(false),
		endedAt: instant('ended_at'),
		fetchedAt: instant('fetched_at').notNull().defaultNow()
	},
	(t) => [index('subscriptions_organisation').on(t.organisationId, t.startedAt)]
);

/** Invoices for the billing page. */
export const invoices = pgTable(
	'invoices',
	{
		id: text('id').primaryKey(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		subscriptionId: text('subscription_id'),
		number: text('number'),
		status: text('status').notNull(),
		billingReason: text('billing_reason'),
		/** In the smallest unit of the currency. */
		total: integer('total').notNull(),
		amountDue: integer('amount_due').notNull(),
		currency: text('currency').notNull(),
		hostedUrl: text('hosted_url'),
		pdfUrl: text('pdf_url'),
		madeAt: instant('made_at').notNull(),
		fetchedAt: instant('fetched_at').notNull().defaultNow()
	},
	(t) => [index('invoices_organisation').on(t.organisationId, t.madeAt)]
);

/** What somebody set out to buy; its id is the root of every idempotency key of that purchase. */
export const checkouts = pgTable(
	'checkouts',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: ['subscription', 'pack'] }).notNull(),
		planId: text('plan_id'),
		interval: text('interval', { enum: ['month', 'year'] }),
		/** Seats, or packs. */
		quantity: integer('quantity').notNull(),
		sessionId: text('session_id'),
		/** The payment of a pack, by which a refund finds it. */
		paymentIntentId: text('payment_intent_id'),
		state: text('state', { enum: ['open', 'complete', 'expired', 'failed'] })
			.notNull()
			.default('open'),
		startedBy: uuid('started_by').references(() => users.id, { onDelete: 'set null' }),
		startedAt: instant('started_at').notNull().defaultNow()
	},
	(t) => [
		uniqueIndex('checkouts_session').on(t.sessionId),
		// A second click continues the first purchase.
		uniqueIndex('checkouts_open_subscription')
			.on(t.organisationId)
			.where(sql`${t.kind} = 'subscription' and ${t.state} = 'open'`)
	]
);

/** Inbox of the payment service's events: stored once, worked off by the queue. */
export const billingEvents = pgTable(
	'billing_events',
	{
		/** The payment service's id. */
		id: text('id').primaryKey(),
		type: text('type').notNull(),
		/** Id of the object that it is about; the object itself is fetched again. */
		objectId: text('object_id').notNull(),
		customerId: text('customer_id'),
		madeAt: instant('made_at').notNull(),
		receivedAt: instant('received_at').notNull().defaultNow(),
		handledAt: instant('handled_at'),
		/** Why it was laid aside or is not handled yet. */
		problem: text('problem')
	},
	(t) => [
		index('billing_events_open')
			.on(t.receivedAt)
			.where(sql`${t.handledAt} is null`)
	]
);

/** Exports that an organisation was given: to try, for a month of a plan, or in a pack. */
export const exportGrants = pgTable(
	'export_grants',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: ['trial', 'month', 'pack'] }).notNull(),
		/** What makes it happen once: "trial:USER", "month:SUBSCRIPTION:START:TOTAL", "pack:SESSION". */
		key: text('key').notNull(),
		amount: integer('amount').notNull(),
		validFrom: instant('valid_from').notNull().defaultNow(),
		/** Null for what does not run out. */
		validUntil: instant('valid_until'),
		grantedAt: instant('granted_at').notNull().defaultNow()
	},
	(t) => [
		uniqueIndex('export_grants_key').on(t.key),
		index('export_grants_organisation').on(t.organisationId, t.validUntil)
	]
);

/** Every use of a grant, and what took part of one away. The balance is a sum over rows, never a counter. */
export const exportDebits = pgTable(
	'export_debits',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		grantId: uuid('grant_id')
			.notNull()
			.references(() => exportGrants.id),
		/** `issue` debits one; `refund` takes back what money was returned for. */
		kind: text('kind', { enum: ['issue', 'refund'] }).notNull(),
		issueId: uuid('issue_id').references(() => issues.id),
		/** "issue:ISSUE", "refund:CHARGE:NUMBER". */
		key: text('key').notNull(),
		/** Negative for a refund that did not go through in the end. */
		amount: integer('amount').notNull(),
		at: instant('at').notNull().defaultNow()
	},
	(t) => [
		uniqueIndex('export_debits_key').on(t.key),
		uniqueIndex('export_debits_issue').on(t.issueId),
		index('export_debits_grant').on(t.grantId)
	]
);

/** How far the daily reconciliation has read the payment service's events. */
export const billingCursor = pgTable('billing_cursor', {
	name: text('name').primaryKey(),
	readUntil: instant('read_until').notNull(),
	checkedAt: instant('checked_at').notNull().defaultNow()
});
