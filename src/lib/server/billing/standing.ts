import { eq, sql } from 'drizzle-orm';
import type { Queryable, Transaction } from '../db';
import { organisations, subscriptions } from '../db/schema';
import { pickSubscription, type Access } from './entitlement';
import type { Allowance } from './ledger-rules';
import { plans } from './plans';

export type Subscription = typeof subscriptions.$inferSelect;

/** How an organisation stands with its plan at one instant of the database's clock. */
export interface PlanStanding {
	now: Date;
	/** The subscription that counts, also one that is over; undefined where there never was one. */
	subscription: Subscription | undefined;
	access: Access | undefined;
}

/** The database's clock: every process asks the same one. */
export async function databaseTime(db: Queryable): Promise<Date> {
	const { rows } = await db.execute<{ now: string }>(sql`select clock_timestamp()::text as now`);
	return new Date(rows[0]?.now ?? '');
}

export async function standingOf(organisationId: string, db: Queryable): Promise<PlanStanding> {
	const now = await databaseTime(db);
	const all = await db.select().from(subscriptions).where(eq(subscriptions.organisationId, organisationId));
	const picked = pickSubscription(all, now, plans());
	return { now, subscription: picked?.subscription, access: picked?.access };
}

/** The same, as the ledger's rules take it. */
export function allowanceOf({ subscription, access }: PlanStanding): Allowance {
	const blocked = access?.blocked ?? false;
	if (!subscription || !access?.allowance || access.plan === undefined)
		return { subscription: null, blocked };
	const { id, anchor, quantity } = subscription;
	return { subscription: { id, anchor, quantity, plan: access.plan }, blocked };
}

/**
 * Holds the organisation's row until the transaction ends, so that what is counted stays counted. Lets rows that refer
 * to the organisation be added meanwhile.
 */
export async function lockOrganisation(tx: Transaction, organisationId: string): Promise<void> {
	await tx
		.select({ id: organisations.id })
		.from(organisations)
		.where(eq(organisations.id, organisationId))
		.for('no key update');
}
