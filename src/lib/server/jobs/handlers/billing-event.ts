import { and, eq, isNull, sql } from 'drizzle-orm';
import { followEvent } from '../../billing/handle-event';
import { billingEvents } from '../../db/schema';
import type { JobDefinition } from '../job';

export const billingEventJob: JobDefinition<'billing-event'> = {
	async handle({ eventId }, { db, log, finish }) {
		const [event] = await db
			.select()
			.from(billingEvents)
			.where(and(eq(billingEvents.id, eventId), isNull(billingEvents.handledAt)));
		if (event === undefined) return;
		const problem = await followEvent(db, event);
		if (problem !== null) log.info({ event: eventId, type: event.type }, `laid aside: ${problem}`);
		await finish(async (tx) => {
			await tx
				.update(billingEvents)
				.set({ handledAt: sql`now()`, problem })
				.where(eq(billingEvents.id, eventId));
		});
	},
	async abandon({ eventId }, problem, tx) {
		// Stays open in the inbox, where the operator sees it; the daily comparison mends what it was about.
		await tx.update(billingEvents).set({ problem }).where(eq(billingEvents.id, eventId));
	}
};
