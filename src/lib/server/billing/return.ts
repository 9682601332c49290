import { eq } from 'drizzle-orm';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { checkouts } from '../db/schema';
import { fulfilCheckout, type Fulfilment } from './fulfil';
import { orAway } from './stripe';

/**
 * What became of a purchase whose buyer is back from the payment page. The address proves nothing: the payment service
 * is asked, by the same code that follows its events.
 * @throws NotFoundError for a session that is not one of this organisation, PaymentsAwayError
 */
export async function returnFromPayment(
	membership: Membership | null,
	sessionId: string,
	db: Database = database()
): Promise<{ outcome: Exclude<Fulfilment, 'unknown'>; kind: 'subscription' | 'pack' }> {
	requireAction(membership, 'billing.manage');
	const [row] = await db
		.select({ kind: checkouts.kind, organisationId: checkouts.organisationId })
		.from(checkouts)
		.where(eq(checkouts.sessionId, sessionId));
	if (row?.organisationId !== membership.organisationId) throw new NotFoundError('purchase');
	const outcome = await orAway(fulfilCheckout(sessionId, { only: membership.organisationId, db }));
	if (outcome === 'unknown') throw new NotFoundError('purchase');
	return { outcome, kind: row.kind };
}
