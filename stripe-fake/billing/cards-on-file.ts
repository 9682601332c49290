import { createHash } from 'node:crypto';
import { cardError, invalidRequest, noSuch } from '../core/errors';
import { find } from '../core/find';
import { newId } from '../core/ids';
import type { Customer, PaymentMethod } from '../core/wire';
import type { World } from '../core/world';
import { cardForToken, cardNumbered, type Card, type Decline } from './cards';

export type CardEntry = { expMonth: number; expYear: number; name: string | null; email: string | null };

/** A card that some day was typed in; not attached to anybody yet. */
export function newPaymentMethod(world: World, card: Card, entry: Partial<CardEntry> = {}): PaymentMethod {
	const now = new Date(world.now() * 1000);
	const made: PaymentMethod = {
		id: newId('pm'),
		object: 'payment_method',
		allow_redisplay: 'unspecified',
		billing_details: {
			address: { city: null, country: null, line1: null, line2: null, postal_code: null, state: null },
			email: entry.email ?? null,
			name: entry.name ?? null,
			phone: null,
			tax_id: null
		},
		card: {
			brand: card.brand,
			checks: { address_line1_check: null, address_postal_code_check: null, cvc_check: 'pass' },
			country: 'US',
			display_brand: card.brand,
			exp_month: entry.expMonth ?? now.getUTCMonth() + 1,
			exp_year: entry.expYear ?? now.getUTCFullYear() + 1,
			fingerprint: createHash('sha256').update(card.number).digest('base64url').slice(0, 16),
			funding: 'credit',
			generated_from: null,
			last4: card.number.slice(-4),
			networks: { available: [card.brand], preferred: null },
			regulated_status: 'unregulated',
			three_d_secure_usage: { supported: true },
			wallet: null
		},
		created: world.now(),
		customer: null,
		customer_account: null,
		livemode: false,
		metadata: {},
		type: 'card'
	};
	world.objects.paymentMethods[made.id] = made;
	world.state.cards[made.id] = { number: card.number, setUp: false };
	return made;
}

/** The card behind a payment method. */
export function cardOf(world: World, paymentMethod: string): Card {
	const known = cardNumbered(world.state.cards[paymentMethod]?.number ?? '');
	if (known === undefined) throw noSuch('PaymentMethod', paymentMethod, 'payment_method');
	return known;
}

export const declined = (decline: Decline, paymentMethod: PaymentMethod) =>
	cardError({
		code: decline.code,
		decline_code: decline.declineCode,
		message: decline.message,
		payment_method: paymentMethod
	});

/** A payment method by its id, or a new one for a test token such as `pm_card_visa`. */
export function paymentMethodFor(world: World, idOrToken: string, param: string): PaymentMethod {
	const card = cardForToken(idOrToken);
	return card === undefined ? find(world, 'paymentMethods', idOrToken, param) : newPaymentMethod(world, card);
}

/**
 * Keeps a card for a customer.
 * @throws ApiError 402 where the card is declined at once
 */
export function attach(world: World, idOrToken: string, customer: string, param: string): PaymentMethod {
	const paymentMethod = paymentMethodFor(world, idOrToken, param);
	if (paymentMethod.customer === customer) return paymentMethod;
	if (paymentMethod.customer !== null)
		throw invalidRequest('The payment method you provided has already been attached to a customer.', {
			code: 'payment_method_unexpected_state',
			param
		});
	const card = cardOf(world, paymentMethod.id);
	if (card.refusedWhenAttached && card.decline !== null) throw declined(card.decline, paymentMethod);
	paymentMethod.customer = customer;
	world.emit('payment_method.attached', paymentMethod);
	return paymentMethod;
}

/** The card that pays what a customer owes: the subscription's own, else the customer's. */
export function payingCard(
	world: World,
	customer: string,
	subscriptionDefault: string | null
): PaymentMethod | undefined {
	const own: Customer | undefined = world.objects.customers[customer];
	const id = subscriptionDefault ?? own?.invoice_settings.default_payment_method ?? null;
	return id === null ? undefined : world.objects.paymentMethods[id];
}
