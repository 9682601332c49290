import type { CheckoutSession, Customer, PaymentMethod } from '../core/wire';
import type { World } from '../core/world';
import { newCustomer } from '../resources/customers';
import { authenticationRequired, type Card, type Decline } from './cards';
import { newPaymentMethod, type CardEntry } from './cards-on-file';
import { collect, failConfirmation, foresee, newIntent, type Attempt } from './collect';
import { payInvoice } from './pay';
import { subscribe } from './subscribe';

export type CheckoutResult =
	{ result: 'paid' } | { result: 'confirm' } | { result: 'declined'; decline: Decline };

const planOf = (world: World, session: CheckoutSession) => {
	const plan = world.state.checkoutPlans[session.id];
	if (plan === undefined) throw new Error(`${session.id} has no lines`);
	return plan;
};

function customerFor(world: World, session: CheckoutSession, paymentMethod: PaymentMethod): Customer | null {
	const given = session.customer === null ? undefined : world.objects.customers[session.customer];
	if (given !== undefined) return given;
	if (session.mode === 'payment' && session.customer_creation !== 'always') return null;
	const { email, name } = paymentMethod.billing_details;
	const made = newCustomer(world, { email, name });
	world.emit('customer.created', made);
	session.customer = made.id;
	return made;
}

/** The PaymentIntent of a one-off payment is made when the customer first tries to pay. */
function intentOf(world: World, session: CheckoutSession) {
	const made = world.objects.paymentIntents[session.payment_intent ?? ''];
	if (made !== undefined) return made;
	const { intentMetadata, description } = planOf(world, session);
	const intent = newIntent(world, {
		amount: session.amount_total ?? 0,
		currency: session.currency ?? 'eur',
		customer: session.customer,
		description,
		metadata: intentMetadata
	});
	session.payment_intent = intent.id;
	return intent;
}

function buyOnce(
	world: World,
	session: CheckoutSession,
	paymentMethod: PaymentMethod,
	attempt: Attempt
): void {
	if ((session.amount_total ?? 0) === 0) return;
	collect(world, intentOf(world, session), paymentMethod, attempt);
}

/** Subscription and invoice come into being only now that the card pays. */
function startSubscription(
	world: World,
	session: CheckoutSession,
	customer: Customer,
	paymentMethod: PaymentMethod,
	attempt: Attempt
): void {
	const { lines, subscriptionMetadata, description } = planOf(world, session);
	paymentMethod.customer = customer.id;
	world.emit('payment_method.attached', paymentMethod);
	const { subscription, invoice } = subscribe(
		world,
		{
			customer,
			items: lines.flatMap(({ price, quantity }) =>
				price === null ? [] : [{ price, quantity: quantity ?? 1, metadata: {} }]
			),
			metadata: { ...subscriptionMetadata },
			description,
			defaultPaymentMethod: paymentMethod.id,
			cancelAtPeriodEnd: false
		},
		true
	);
	payInvoice(world, invoice, { ...attempt, setUp: true }, paymentMethod);
	session.subscription = subscription.id;
	session.invoice = invoice.id;
}

function complete(
	world: World,
	session: CheckoutSession,
	paymentMethod: PaymentMethod,
	confirmed: boolean
): void {
	const attempt: Attempt = { onSession: true, confirmed, typedIn: true };
	const customer = customerFor(world, session, paymentMethod);
	if (session.mode === 'subscription' && customer !== null)
		startSubscription(world, session, customer, paymentMethod, attempt);
	else buyOnce(world, session, paymentMethod, attempt);
	planOf(world, session).pendingPaymentMethod = null;
	const { email, name } = paymentMethod.billing_details;
	session.customer_details = {
		address: customer?.address ?? null,
		business_name: null,
		email: session.customer_details?.email ?? email,
		individual_name: null,
		name,
		phone: null,
		tax_exempt: customer?.tax_exempt ?? 'none',
		tax_ids: []
	};
	session.status = 'complete';
	session.payment_status = session.amount_total === 0 ? 'no_payment_required' : 'paid';
	session.url = null;
	world.emit('checkout.session.completed', session);
}

/** What the customer's card comes to on the page. The session stays open unless it pays. */
export function payCheckout(
	world: World,
	session: CheckoutSession,
	card: Card,
	entry: CardEntry
): CheckoutResult {
	const paymentMethod = newPaymentMethod(world, card, entry);
	const attempt: Attempt = { onSession: true, typedIn: true };
	const foreseen = foresee(world, paymentMethod, attempt);
	if (foreseen.result === 'confirm') {
		planOf(world, session).pendingPaymentMethod = paymentMethod.id;
		return foreseen;
	}
	if (foreseen.result === 'declined') {
		if (session.mode === 'payment') buyOnce(world, session, paymentMethod, attempt);
		return foreseen;
	}
	complete(world, session, paymentMethod, false);
	return foreseen;
}

export const awaitsConfirmation = (world: World, session: CheckoutSession): boolean =>
	planOf(world, session).pendingPaymentMethod !== null;

/** The customer answers the question of the card's issuer. */
export function confirmCheckout(world: World, session: CheckoutSession, agreed: boolean): CheckoutResult {
	const plan = planOf(world, session);
	const paymentMethod = world.objects.paymentMethods[plan.pendingPaymentMethod ?? ''];
	plan.pendingPaymentMethod = null;
	if (paymentMethod === undefined || !agreed) {
		if (paymentMethod !== undefined && session.mode === 'payment')
			failConfirmation(world, intentOf(world, session), paymentMethod);
		return { result: 'declined', decline: authenticationRequired };
	}
	const attempt: Attempt = { onSession: true, confirmed: true, typedIn: true };
	const foreseen = foresee(world, paymentMethod, attempt);
	if (foreseen.result === 'paid') complete(world, session, paymentMethod, true);
	else if (session.mode === 'payment') buyOnce(world, session, paymentMethod, attempt);
	return foreseen;
}
