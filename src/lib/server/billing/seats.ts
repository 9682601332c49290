import { eq } from 'drizzle-orm';
import { database, type Queryable } from '../db';
import { memberships } from '../db/schema';
import { plans } from './plans';
import { standingOf } from './standing';

export interface Seats {
	/** Members; guests take no seat. */
	taken: number;
	/** Seats paid for, or those that come without a plan. */
	limit: number;
}

/**
 * Seats taken and paid for. More may be taken than are paid for once a plan has ended: nobody is put out, and nobody
 * comes in.
 */
export async function seatsOf(organisationId: string, db: Queryable = database()): Promise<Seats> {
	const { subscription, access } = await standingOf(organisationId, db);
	const taken = await db.$count(memberships, eq(memberships.organisationId, organisationId));
	const limit = access?.allowance && subscription ? subscription.quantity : plans().trial.seats;
	return { taken, limit };
}
