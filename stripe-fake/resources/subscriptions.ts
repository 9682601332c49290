import { cancelNow } from '../billing/cancel';
import { payingCard } from '../billing/cards-on-file';
import {
	applyChange,
	planChange,
	requirePaid,
	requirePayable,
	type ItemChange,
	type Proration
} from '../billing/change';
import { foresee } from '../billing/collect';
import { draftInvoice, finalize, pendingItems } from '../billing/invoices';
import { prorationItem } from '../billing/lines';
import { payInvoice } from '../billing/pay';
import { requireRecurring, subscribe, totalOf } from '../billing/subscribe';
import type { Call, Routes } from '../core/call';
import { noSuch } from '../core/errors';
import { find } from '../core/find';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata, type Params } from '../core/params';
import type { List, Subscription, SubscriptionItem } from '../core/wire';
import type { World } from '../core/world';

const prorations = ['create_prorations', 'always_invoice', 'none'] as const satisfies Proration[];

function create({ world, params }: Call): Subscription {
	const customerId = params.required('customer');
	const items = (params.list('items') ?? []).map((item) => ({
		price: item.required('price'),
		quantity: item.integer('quantity', { least: 0 }) ?? 1,
		metadata: mergeMetadata(null, item.metadata())
	}));
	const behavior =
		params.oneOf('payment_behavior', ['allow_incomplete', 'default_incomplete', 'error_if_incomplete']) ??
		'allow_incomplete';
	const given = {
		metadata: mergeMetadata(null, params.metadata()),
		description: params.text('description') ?? null,
		defaultPaymentMethod: params.string('default_payment_method') ?? null,
		cancelAtPeriodEnd: params.boolean('cancel_at_period_end') ?? false
	};
	const onSession = !(params.boolean('off_session') ?? false);
	const settings = params.child('payment_settings');
	const save = settings?.oneOf('save_default_payment_method', ['off', 'on_subscription']);
	params.child('billing_mode')?.oneOf('type', ['flexible']);
	params.oneOf('collection_method', ['charge_automatically']);
	params.oneOf('proration_behavior', prorations);
	if (items.length === 0) throw params.missing('items');
	params.done();
	const customer = find(world, 'customers', customerId, 'customer');
	const withPrices = items.map((item, index) => ({
		...item,
		price: find(world, 'prices', item.price, `items[${index}][price]`)
	}));
	requireRecurring(
		withPrices.map(({ price }) => price),
		(index) => `items[${index}][price]`
	);
	if (given.defaultPaymentMethod !== null) requireAttached(world, given.defaultPaymentMethod, customer.id);
	const free = totalOf(withPrices) + customer.balance <= 0;
	const card = payingCard(world, customer.id, given.defaultPaymentMethod);
	const charges = !free && behavior !== 'default_incomplete';
	if (charges && behavior === 'error_if_incomplete') requirePaid(world, card, onSession);
	if (charges && card === undefined) requirePaid(world, card, onSession);
	const paid =
		free || (charges && card !== undefined && foresee(world, card, { onSession }).result === 'paid');
	const { subscription, invoice } = subscribe(world, { customer, items: withPrices, ...given }, paid);
	if (save !== undefined && subscription.payment_settings !== null)
		subscription.payment_settings.save_default_payment_method = save;
	if (free || charges) payInvoice(world, invoice, { onSession, setUp: true });
	return subscription;
}

function requireAttached(world: World, paymentMethod: string, customer: string): void {
	if (find(world, 'paymentMethods', paymentMethod, 'default_payment_method').customer !== customer)
		throw noSuch('PaymentMethod', paymentMethod, 'default_payment_method');
}

/** A subscription that has ended cannot be changed any more, as if it were gone. */
function findRunning(world: World, id: string): Subscription {
	const subscription = find(world, 'subscriptions', id);
	if (subscription.ended_at !== null) throw noSuch('subscription', id);
	return subscription;
}

export function readItemChanges(params: Params): {
	list: { [Field in keyof ItemChange]: Field extends 'price' ? string | undefined : ItemChange[Field] }[];
	resolve: (world: World, subscription?: Subscription) => ItemChange[];
} {
	const list = (params.list('items') ?? []).map((item) => {
		const metadata = item.metadata();
		return {
			id: item.string('id'),
			price: item.string('price'),
			quantity: item.integer('quantity', { least: 0 }),
			deleted: item.boolean('deleted') ?? false,
			metadata: metadata === undefined ? undefined : mergeMetadata(null, metadata)
		};
	});
	return {
		list,
		resolve: (world, subscription) =>
			list.map((item, index) => {
				if (item.id !== undefined && !subscription?.items.data.some(({ id }) => id === item.id))
					throw noSuch('subscription_item', item.id, `items[${index}][id]`);
				return {
					...item,
					price:
						item.price === undefined ? undefined : find(world, 'prices', item.price, `items[${index}][price]`)
				};
			})
	};
}

/** Sets or takes back the end at the end of the period. */
export function setEnd(world: World, subscription: Subscription, atPeriodEnd: boolean): void {
	subscription.cancel_at_period_end = atPeriodEnd;
	subscription.cancel_at = atPeriodEnd ? (subscription.items.data[0]?.current_period_end ?? null) : null;
	subscription.canceled_at = atPeriodEnd ? world.now(subscription.customer) : null;
	if (subscription.cancellation_details !== null)
		subscription.cancellation_details.reason = atPeriodEnd ? 'cancellation_requested' : null;
}

function update({ world, params, ids: [id = ''] }: Call): Subscription {
	const subscription = findRunning(world, id);
	const items = readItemChanges(params);
	const details = params.child('cancellation_details');
	const given = {
		proration: params.oneOf('proration_behavior', prorations) ?? 'create_prorations',
		at: params.integer('proration_date'),
		behavior:
			params.oneOf('payment_behavior', ['allow_incomplete', 'default_incomplete', 'error_if_incomplete']) ??
			'allow_incomplete',
		cancelAtPeriodEnd: params.boolean('cancel_at_period_end'),
		defaultPaymentMethod: params.text('default_payment_method'),
		description: params.text('description'),
		metadata: params.metadata(),
		anchor: params.child('billing_cycle_anchor')?.oneOf('type', ['now', 'unchanged']),
		comment: details?.text('comment'),
		feedback: details?.string('feedback')
	};
	params.ignore('off_session');
	params.done();
	if (given.defaultPaymentMethod != null)
		requireAttached(world, given.defaultPaymentMethod, subscription.customer);
	const change = {
		items: items.resolve(world, subscription),
		proration: given.proration,
		at: given.at ?? world.now(subscription.customer),
		anchorNow: given.anchor === 'now'
	};
	const plan = planChange(world, subscription, change);
	if (given.behavior === 'error_if_incomplete') requirePayable(world, subscription, change, plan);
	applyChange(world, subscription, change, plan, () => {
		if (given.defaultPaymentMethod !== undefined)
			subscription.default_payment_method = given.defaultPaymentMethod;
		if (given.description !== undefined) subscription.description = given.description;
		subscription.metadata = mergeMetadata(subscription.metadata, given.metadata);
		if (
			given.cancelAtPeriodEnd !== undefined &&
			given.cancelAtPeriodEnd !== subscription.cancel_at_period_end
		)
			setEnd(world, subscription, given.cancelAtPeriodEnd);
		if (subscription.cancellation_details !== null) {
			if (given.comment !== undefined) subscription.cancellation_details.comment = given.comment;
			if (given.feedback !== undefined) subscription.cancellation_details.feedback = given.feedback;
		}
	});
	return subscription;
}

function cancel({ world, params, ids: [id = ''] }: Call): Subscription {
	const subscription = findRunning(world, id);
	const given = {
		invoiceNow: params.boolean('invoice_now') ?? false,
		prorate: params.boolean('prorate') ?? false,
		details: params.child('cancellation_details')
	};
	const comment = given.details?.text('comment');
	const feedback = given.details?.string('feedback');
	params.done();
	const at = world.now(subscription.customer);
	if (given.prorate)
		for (const item of subscription.items.data) {
			const credit = prorationItem(world, subscription, item, at, -1);
			world.objects.invoiceItems[credit.id] = credit;
			world.emit('invoiceitem.created', credit);
		}
	if (subscription.cancellation_details !== null) {
		if (comment !== undefined) subscription.cancellation_details.comment = comment;
		if (feedback !== undefined) subscription.cancellation_details.feedback = feedback;
	}
	const customer = world.objects.customers[subscription.customer];
	cancelNow(world, subscription, 'cancellation_requested');
	if (given.invoiceNow && customer !== undefined && pendingItems(world, subscription.id).length > 0) {
		const invoice = draftInvoice(world, {
			customer,
			subscription,
			lines: [],
			reason: 'subscription_update',
			period: { start: at, end: at },
			finalizesAt: null
		});
		finalize(world, invoice);
		payInvoice(world, invoice, { onSession: false });
	}
	return subscription;
}

function retrieve({ world, params, ids: [id = ''] }: Call): Subscription {
	params.done();
	return find(world, 'subscriptions', id);
}

function list({ world, params }: Call): List<Subscription> {
	const customer = params.string('customer');
	const price = params.string('price');
	const status = params.oneOf('status', [
		'active',
		'all',
		'canceled',
		'ended',
		'incomplete',
		'incomplete_expired',
		'past_due',
		'paused',
		'trialing',
		'unpaid'
	]);
	const created = readRange(params, 'created');
	const periodEnd = readRange(params, 'current_period_end');
	const paging = readPaging(params);
	params.done();
	const fits = (subscription: Subscription) => {
		if (status === undefined) return subscription.status !== 'canceled';
		if (status === 'all') return true;
		if (status === 'ended') return ['canceled', 'incomplete_expired'].includes(subscription.status);
		return subscription.status === status;
	};
	const found = newestFirst(world.objects.subscriptions).filter(
		(subscription) =>
			fits(subscription) &&
			(customer === undefined || subscription.customer === customer) &&
			(price === undefined || subscription.items.data.some((item) => item.price.id === price)) &&
			isWithin(subscription.created, created) &&
			isWithin(subscription.items.data[0]?.current_period_end ?? 0, periodEnd)
	);
	return pageOf(found, paging, '/v1/subscriptions', 'subscription');
}

function listItems({ world, params }: Call): List<SubscriptionItem> {
	const subscription = params.required('subscription');
	const paging = readPaging(params);
	params.done();
	const { items } = find(world, 'subscriptions', subscription, 'subscription');
	return pageOf(items.data, paging, '/v1/subscription_items', 'subscription_item');
}

export const subscriptions: Routes = {
	'POST /v1/subscriptions': create,
	'GET /v1/subscriptions': list,
	'GET /v1/subscriptions/:id': retrieve,
	'POST /v1/subscriptions/:id': update,
	'DELETE /v1/subscriptions/:id': cancel,
	'GET /v1/subscription_items': listItems
};
