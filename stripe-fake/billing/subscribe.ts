import { invalidRequest } from '../core/errors';
import { newId } from '../core/ids';
import { wholeList } from '../core/lists';
import type { Customer, Invoice, Plan, Price, Subscription, SubscriptionItem } from '../core/wire';
import type { World } from '../core/world';
import type { Attempt } from './collect';
import { draftInvoice, finalize } from './invoices';
import { cycleLine, lineAmount, type Period } from './lines';
import { payInvoice, type Payment } from './pay';
import { addInterval } from './periods';

export type ItemRequest = { price: Price; quantity: number; metadata: Record<string, string> };

const planOf = (price: Price): Plan => ({
	id: price.id,
	object: 'plan',
	active: price.active,
	amount: price.unit_amount,
	amount_decimal: price.unit_amount_decimal,
	billing_scheme: price.billing_scheme,
	created: price.created,
	currency: price.currency,
	interval: price.recurring?.interval ?? 'month',
	interval_count: price.recurring?.interval_count ?? 1,
	livemode: false,
	metadata: price.metadata,
	meter: null,
	nickname: price.nickname,
	product: price.product,
	tiers_mode: null,
	transform_usage: null,
	trial_period_days: null,
	usage_type: 'licensed'
});

export const newItem = (
	subscription: string,
	{ price, quantity, metadata }: ItemRequest,
	period: Period
): SubscriptionItem => ({
	id: newId('si'),
	object: 'subscription_item',
	billing_thresholds: null,
	created: period.start,
	current_period_end: period.end,
	current_period_start: period.start,
	current_trial: null,
	discounts: [],
	metadata,
	plan: planOf(price),
	price: structuredClone(price),
	quantity,
	subscription,
	tax_rates: []
});

/** Puts another price into an item. */
export function setPrice(item: SubscriptionItem, price: Price): void {
	item.price = structuredClone(price);
	item.plan = planOf(price);
}

export function periodFrom(start: number, price: Price, anchor = start): Period {
	const { interval = 'month', interval_count = 1 } = price.recurring ?? {};
	return { start, end: addInterval(start, interval, interval_count, anchor) };
}

/** @throws ApiError where a price cannot be subscribed to, or prices do not go together */
export function requireRecurring(prices: Price[], param: (index: number) => string): void {
	const [first] = prices;
	prices.forEach((price, index) => {
		if (price.recurring === null)
			throw invalidRequest(
				`The price specified is set to \`type=one_time\` but this field only accepts prices with \`type=recurring\`.`,
				{ param: param(index) }
			);
		if (!price.active)
			throw invalidRequest('The price specified is inactive. This field only accepts active prices.', {
				param: param(index)
			});
		if (price.currency !== first?.currency)
			throw invalidRequest('Currency of the prices must match.', { param: param(index) });
		if (price.recurring.interval !== first.recurring?.interval)
			throw invalidRequest('Prices must have the same interval here.', { param: param(index) });
	});
}

export type SubscribeRequest = {
	customer: Customer;
	items: ItemRequest[];
	metadata: Record<string, string>;
	description: string | null;
	defaultPaymentMethod: string | null;
	cancelAtPeriodEnd: boolean;
};

export const totalOf = (items: ItemRequest[]): number =>
	items.reduce((sum, { price, quantity }) => sum + lineAmount(price, quantity), 0);

function compose(world: World, request: SubscribeRequest): Subscription {
	const { customer, items } = request;
	const [first] = items;
	if (first === undefined) throw invalidRequest('A subscription needs items.', { param: 'items' });
	const now = world.now(customer.id);
	const period = periodFrom(now, first.price);
	const id = newId('sub');
	return {
		id,
		object: 'subscription',
		application: null,
		application_fee_percent: null,
		automatic_tax: { disabled_reason: null, enabled: false, liability: null },
		billing_cycle_anchor: now,
		billing_cycle_anchor_config: null,
		billing_mode: { type: 'flexible', flexible: { proration_discounts: 'included' } },
		billing_schedules: [],
		billing_thresholds: null,
		cancel_at: request.cancelAtPeriodEnd ? period.end : null,
		cancel_at_period_end: request.cancelAtPeriodEnd,
		canceled_at: request.cancelAtPeriodEnd ? now : null,
		cancellation_details: { comment: null, feedback: null, feedback_option: null, reason: null },
		collection_method: 'charge_automatically',
		created: now,
		currency: first.price.currency,
		customer: customer.id,
		customer_account: null,
		days_until_due: null,
		default_payment_method: request.defaultPaymentMethod,
		default_source: null,
		default_tax_rates: [],
		description: request.description,
		discounts: [],
		ended_at: null,
		invoice_settings: {
			account_tax_ids: null,
			custom_fields: null,
			description: null,
			footer: null,
			issuer: { type: 'self' }
		},
		items: wholeList(
			items.map((item) => newItem(id, item, period)),
			`/v1/subscription_items?subscription=${id}`
		),
		latest_invoice: null,
		livemode: false,
		managed_payments: null,
		metadata: request.metadata,
		next_pending_invoice_item_invoice: null,
		on_behalf_of: null,
		pause_collection: null,
		payment_settings: {
			payment_method_options: null,
			payment_method_types: null,
			save_default_payment_method: 'off'
		},
		pending_invoice_item_interval: null,
		pending_setup_intent: null,
		pending_update: null,
		schedule: null,
		start_date: now,
		status: 'incomplete',
		test_clock: null,
		transfer_data: null,
		trial_end: null,
		trial_settings: {
			end_behavior: { billing_cycle_anchor: null, missing_payment_method: 'create_invoice' }
		},
		trial_start: null
	};
}

/**
 * Makes a subscription with its first invoice, finalised.
 * @param paid whether that invoice will be paid at once, so that the subscription begins as active
 */
export function subscribe(
	world: World,
	request: SubscribeRequest,
	paid: boolean
): { subscription: Subscription; invoice: Invoice } {
	const subscription = compose(world, request);
	if (paid) subscription.status = 'active';
	world.objects.subscriptions[subscription.id] = subscription;
	const period = {
		start: subscription.start_date,
		end: subscription.items.data[0]?.current_period_end ?? subscription.start_date
	};
	world.emit('customer.subscription.created', subscription);
	const invoice = draftInvoice(world, {
		customer: request.customer,
		subscription,
		lines: subscription.items.data.map((item) => cycleLine(world, subscription, item, period)),
		reason: 'subscription_create',
		period: { start: period.start, end: period.start },
		finalizesAt: null
	});
	finalize(world, invoice);
	return { subscription, invoice };
}

/** The same, and charges the card that pays. */
export function subscribeAndPay(
	world: World,
	request: SubscribeRequest,
	paid: boolean,
	attempt: Attempt
): { subscription: Subscription; invoice: Invoice; payment: Payment } {
	const { subscription, invoice } = subscribe(world, request, paid);
	return { subscription, invoice, payment: payInvoice(world, invoice, attempt) };
}
