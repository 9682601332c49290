import type { World } from '../core/world';

/** Fields of objects that hold Unix seconds. */
const times = new Set([
	'created',
	'current_period_start',
	'current_period_end',
	'billing_cycle_anchor',
	'start_date',
	'cancel_at',
	'canceled_at',
	'ended_at',
	'period_start',
	'period_end',
	'start',
	'end',
	'date',
	'effective_at',
	'finalized_at',
	'paid_at',
	'voided_at',
	'marked_uncollectible_at',
	'automatically_finalizes_at',
	'next_payment_attempt',
	'expires_at'
]);

const isHolder = (value: unknown): value is { [name: string]: unknown } =>
	typeof value === 'object' && value !== null;

function moveBack(value: unknown, seconds: number): void {
	if (!isHolder(value)) return;
	for (const [name, field] of Object.entries(value)) {
		if (name === 'metadata' || name === 'price' || name === 'plan') continue;
		if (times.has(name) && typeof field === 'number') value[name] = field - seconds;
		else moveBack(field, seconds);
	}
}

/** Moves everything that a customer has into the past. Events stay: they tell what was said. */
export function age(world: World, customer: string, seconds: number): void {
	const { objects, state } = world;
	const owned = [
		...Object.values(objects.subscriptions),
		...Object.values(objects.invoices),
		...Object.values(objects.invoiceItems),
		...Object.values(objects.paymentIntents),
		...Object.values(objects.charges),
		...Object.values(objects.refunds),
		...Object.values(objects.paymentMethods),
		...Object.values(objects.checkoutSessions)
	].filter((object) => object.customer === customer);
	const mine = new Set(owned.map(({ id }) => id));
	moveBack(objects.customers[customer], seconds);
	for (const object of owned) moveBack(object, seconds);
	for (const payment of Object.values(objects.invoicePayments))
		if (mine.has(payment.invoice)) moveBack(payment, seconds);
	for (const [invoice, end] of Object.entries(state.dunningEnds))
		if (mine.has(invoice)) state.dunningEnds[invoice] = end - seconds;
}
