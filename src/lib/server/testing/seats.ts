import { randomUUID } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import type { Database } from '../db';
import { subscriptions } from '../db/schema';

/** A paid plan with so many seats for an organisation; called again, it changes their number. */
export async function giveSeats(db: Database, organisationId: string, seats: number): Promise<void> {
	const changed = await db
		.update(subscriptions)
		.set({ quantity: seats })
		.where(eq(subscriptions.organisationId, organisationId))
		.returning({ id: subscriptions.id });
	if (changed.length > 0) return;
	const id = randomUUID();
	const nextMonth = sql`now() + interval '30 days'`;
	await db.insert(subscriptions).values({
		id: `sub_${id}`,
		organisationId,
		customerId: `cus_${id}`,
		status: 'active',
		planId: 'practice',
		interval: 'month',
		priceId: 'price_practice',
		itemId: `si_${id}`,
		quantity: seats,
		startedAt: sql`now()`,
		anchor: sql`now()`,
		periodStart: sql`now()`,
		periodEnd: nextMonth,
		paidUntil: nextMonth
	});
}
