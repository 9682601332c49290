import type { Invoice, PaymentMethod, Subscription } from '../core/wire';
import type { World } from '../core/world';
import { cancelNow } from './cancel';
import type { Decline } from './cards';
import { payingCard } from './cards-on-file';
import { collect, failConfirmation, type Attempt } from './collect';
import { markPaid, paymentOf } from './invoices';

const day = 86_400;

export type Payment =
	| { result: 'paid' }
	| { result: 'no card' }
	| { result: 'confirm' }
	| { result: 'declined'; decline: Decline; paymentMethod: PaymentMethod };

export const subscriptionOf = (world: World, invoice: Invoice): Subscription | undefined =>
	world.objects.subscriptions[invoice.parent?.subscription_details?.subscription ?? ''];

const setStatus = (world: World, subscription: Subscription, status: Subscription['status']): void =>
	world.change('customer.subscription.updated', subscription, () => {
		subscription.status = status;
	});

/** After the last attempt the account's setting decides. */
export function giveUp(world: World, invoice: Invoice): void {
	const subscription = subscriptionOf(world, invoice);
	Reflect.deleteProperty(world.state.dunningEnds, invoice.id);
	invoice.next_payment_attempt = null;
	invoice.auto_advance = false;
	if (subscription === undefined || subscription.ended_at !== null) return;
	const { end } = world.settings.dunning;
	if (end === 'cancel') cancelNow(world, subscription, 'payment_failed');
	else setStatus(world, subscription, end);
}

/** What an unpaid invoice does to its subscription; the first one leaves it incomplete. */
function afterFailure(world: World, invoice: Invoice, decline: Decline | null, hasCard: boolean): void {
	const subscription = subscriptionOf(world, invoice);
	const { retryDays } = world.settings.dunning;
	const wait = retryDays[invoice.attempt_count - 1];
	const isFirst = invoice.billing_reason === 'subscription_create';
	// Nobody is asked again who said a final no, or where there is no card to ask.
	const again = !isFirst && wait !== undefined && hasCard && decline?.final !== true;
	invoice.next_payment_attempt = again ? world.now(invoice.customer) + wait * day : null;
	world.emit('invoice.payment_failed', invoice);
	if (subscription === undefined || isFirst || subscription.ended_at !== null) return;
	if (subscription.status === 'active') setStatus(world, subscription, 'past_due');
	if (again) return;
	// Until the last attempt would have been, somebody may still pay the invoice on its page.
	const left = retryDays.slice(invoice.attempt_count - 1).reduce((sum, days) => sum + days, 0);
	if (left === 0) giveUp(world, invoice);
	else world.state.dunningEnds[invoice.id] = world.now(invoice.customer) + left * day;
}

/** Brings the subscription back where its latest invoice is paid. */
function afterPayment(world: World, invoice: Invoice): void {
	Reflect.deleteProperty(world.state.dunningEnds, invoice.id);
	const subscription = subscriptionOf(world, invoice);
	if (subscription === undefined || subscription.latest_invoice !== invoice.id) return;
	if (['incomplete', 'past_due', 'unpaid'].includes(subscription.status))
		setStatus(world, subscription, 'active');
}

/**
 * Tries to collect a finalised invoice.
 * @param with a card of the customer's choice instead of the one that usually pays
 */
export function payInvoice(
	world: World,
	invoice: Invoice,
	attempt: Attempt,
	chosen?: PaymentMethod
): Payment {
	const subscription = subscriptionOf(world, invoice);
	if (invoice.amount_due === 0) {
		markPaid(world, invoice);
		afterPayment(world, invoice);
		return { result: 'paid' };
	}
	const paymentMethod =
		chosen ?? payingCard(world, invoice.customer ?? '', subscription?.default_payment_method ?? null);
	const payment = paymentOf(world, invoice);
	const intent = world.objects.paymentIntents[payment?.payment.payment_intent ?? ''];
	if (intent === undefined) throw new Error(`${invoice.id} has nothing to be paid with`);
	invoice.attempted = true;
	invoice.attempt_count += 1;
	if (paymentMethod === undefined) {
		afterFailure(world, invoice, null, false);
		return { result: 'no card' };
	}
	const outcome = collect(world, intent, paymentMethod, attempt);
	if (outcome.result === 'paid') {
		markPaid(world, invoice);
		afterPayment(world, invoice);
		return { result: 'paid' };
	}
	if (outcome.result === 'confirm') {
		world.emit('invoice.payment_action_required', invoice);
		if (!attempt.onSession) afterFailure(world, invoice, null, true);
		return { result: 'confirm' };
	}
	afterFailure(world, invoice, outcome.decline, true);
	return { result: 'declined', decline: outcome.decline, paymentMethod };
}

/** The customer refused to confirm the payment of an invoice. */
export function refuseConfirmation(world: World, invoice: Invoice, paymentMethod: PaymentMethod): void {
	const intent = world.objects.paymentIntents[paymentOf(world, invoice)?.payment.payment_intent ?? ''];
	if (intent !== undefined) failConfirmation(world, intent, paymentMethod);
}

/** Marks an invoice as paid by other means. */
export function payOutOfBand(world: World, invoice: Invoice): void {
	markPaid(world, invoice, true);
	afterPayment(world, invoice);
}
