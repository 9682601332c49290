import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { env } from '../env';
import { customerOf } from './customers';
import { requirePaymentPage } from './payment-page';
import { orAway, stripe } from './stripe';

/**
 * The payment service's page for card, address, invoices and cancellation. Its address is a key by itself: it goes to
 * the browser and nowhere else.
 * @throws ConflictError before the first purchase
 */
export async function openPortal(membership: Membership | null, db: Database = database()): Promise<string> {
	requireAction(membership, 'billing.manage');
	const customer = await customerOf(membership.organisationId, db);
	if (customer === null) {
		throw new ConflictError('There is nothing to manage yet: nothing has been bought.');
	}
	await limit(`portal:${membership.organisationId}`, 30, 3600, db);
	const session = await orAway(
		stripe().billingPortal.sessions.create({ customer, return_url: `${env().ORIGIN}/billing` })
	);
	await recordAudit(db, membership, 'billing.portal', null);
	return requirePaymentPage(session.url);
}
