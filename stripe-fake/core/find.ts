import { noSuch } from './errors';
import type { ById, Kinds } from './state';
import type { World } from './world';

const names = {
	products: 'product',
	prices: 'price',
	customers: 'customer',
	deletedCustomers: 'customer',
	paymentMethods: 'PaymentMethod',
	paymentIntents: 'payment_intent',
	charges: 'charge',
	refunds: 'refund',
	subscriptions: 'subscription',
	invoices: 'invoice',
	invoiceItems: 'invoiceitem',
	invoicePayments: 'invoice_payment',
	checkoutSessions: 'checkout.session',
	portalSessions: 'billing_portal.session',
	events: 'event'
} as const satisfies { [Kind in keyof Kinds]: string };

export const nameOf = (kind: keyof Kinds): string => names[kind];

/**
 * @param param which parameter named it; the path did if left out
 * @throws ApiError `resource_missing`
 */
export function find<Kind extends keyof Kinds>(
	world: World,
	kind: Kind,
	id: string,
	param?: string
): Kinds[Kind] {
	const objects: ById<Kinds[Kind]> = world.objects[kind];
	const found = Object.hasOwn(objects, id) ? objects[id] : undefined;
	if (found === undefined) throw noSuch(names[kind], id, param);
	return found;
}
