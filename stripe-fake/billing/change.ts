import { invalidRequest } from '../core/errors';
import type { Invoice, InvoiceItem, InvoiceLine, Price, Subscription, SubscriptionItem } from '../core/wire';
import type { World } from '../core/world';
import { declined, payingCard } from './cards-on-file';
import { foresee } from './collect';
import { composeInvoice, draftInvoice, finalize, pendingItems } from './invoices';
import { cycleLine, lineOfItem, prorationItem } from './lines';
import { payInvoice } from './pay';
import { newItem, periodFrom, requireRecurring, setPrice } from './subscribe';

export type ItemChange = {
	/** Undefined adds a second item: Stripe does the same where the id was forgotten. */
	id: string | undefined;
	price: Price | undefined;
	quantity: number | undefined;
	deleted: boolean;
	metadata: Record<string, string> | undefined;
};

export type Proration = 'create_prorations' | 'always_invoice' | 'none';

export type Change = {
	items: ItemChange[];
	proration: Proration;
	at: number;
	/** Begin a new period now. */
	anchorNow: boolean;
};

export type Plan = {
	items: SubscriptionItem[];
	prorations: InvoiceItem[];
	/** A new period begins, and is billed at once. */
	restarted: boolean;
};

function changedItem(world: World, subscription: Subscription, before: SubscriptionItem, change: ItemChange) {
	const item = structuredClone(before);
	if (change.price !== undefined) setPrice(item, change.price);
	item.quantity = change.quantity ?? item.quantity;
	if (change.metadata !== undefined) item.metadata = change.metadata;
	const same = item.price.id === before.price.id && item.quantity === before.quantity;
	return { item, same };
}

/** What a change comes to, without changing anything. */
export function planChange(world: World, subscription: Subscription, change: Change): Plan {
	const before = subscription.items.data;
	const after: SubscriptionItem[] = [];
	const credited: SubscriptionItem[] = [];
	const charged: SubscriptionItem[] = [];
	for (const item of before) {
		const wanted = change.items.find(({ id }) => id === item.id);
		if (wanted === undefined) {
			after.push(structuredClone(item));
			continue;
		}
		if (wanted.deleted) {
			credited.push(item);
			continue;
		}
		const { item: changed, same } = changedItem(world, subscription, item, wanted);
		after.push(changed);
		if (!same) {
			credited.push(item);
			charged.push(changed);
		}
	}
	const current = before[0];
	if (current === undefined) throw new Error(`${subscription.id} has no item`);
	for (const { id, price, quantity, metadata } of change.items) {
		if (id !== undefined) continue;
		if (price === undefined)
			throw invalidRequest('Missing required param: items[0][price].', { code: 'parameter_missing' });
		if (before.some((item) => item.price.id === price.id))
			throw invalidRequest(
				`Cannot add multiple subscription items with the same price. Please instead use the item's id to change it.`,
				{ param: 'items' }
			);
		const added = newItem(
			subscription.id,
			{ price, quantity: quantity ?? 1, metadata: metadata ?? {} },
			{ start: current.current_period_start, end: current.current_period_end }
		);
		after.push(added);
		charged.push(added);
	}
	const first = after[0];
	if (first === undefined)
		throw invalidRequest('A subscription must have at least one active plan.', { param: 'items' });
	requireRecurring(
		after.map(({ price }) => price),
		(index) => `items[${index}][price]`
	);
	const restarted = change.anchorNow || first.price.recurring?.interval !== current.price.recurring?.interval;
	const sides = change.proration !== 'none';
	const prorations = [
		...(sides ? (restarted ? before : credited) : []).map((item) =>
			prorationItem(world, subscription, item, change.at, -1)
		),
		...(sides && !restarted ? charged : []).map((item) =>
			prorationItem(world, subscription, item, change.at, 1)
		)
	].filter(({ amount }) => amount !== 0);
	if (restarted) {
		const period = periodFrom(change.at, first.price);
		for (const item of after) {
			item.current_period_start = period.start;
			item.current_period_end = period.end;
		}
	}
	return { items: after, prorations, restarted };
}

export function fullLines(
	world: World,
	subscription: Subscription,
	items: SubscriptionItem[]
): InvoiceLine[] {
	return items.map((item) =>
		cycleLine(world, subscription, item, {
			start: item.current_period_start,
			end: item.current_period_end
		})
	);
}

const bills = (change: Change, plan: Plan): boolean =>
	plan.restarted || (change.proration === 'always_invoice' && plan.prorations.length > 0);

/** @throws ApiError 402 where what the change bills at once cannot be collected */
export function requirePayable(world: World, subscription: Subscription, change: Change, plan: Plan): void {
	const customer = world.objects.customers[subscription.customer];
	if (!bills(change, plan) || customer === undefined) return;
	const lines = [...pendingItems(world, subscription.id), ...plan.prorations].map((item) =>
		lineOfItem(world, item)
	);
	const due = composeInvoice(world, 'in_foreseen', {
		customer,
		subscription,
		lines: [...lines, ...(plan.restarted ? fullLines(world, subscription, plan.items) : [])],
		reason: 'subscription_update',
		period: { start: change.at, end: change.at },
		finalizesAt: null
	}).amount_due;
	if (due === 0) return;
	const card = payingCard(world, customer.id, subscription.default_payment_method);
	requirePaid(world, card, true);
}

/** @throws ApiError 402 unless the card would pay at once, or 400 where there is none */
export function requirePaid(
	world: World,
	card: ReturnType<typeof payingCard>,
	onSession: boolean
): asserts card is NonNullable<typeof card> {
	if (card === undefined)
		throw invalidRequest(
			'This customer has no attached payment source or default payment method. Please consider adding a default payment method.',
			{ code: 'resource_missing' }
		);
	const foreseen = foresee(world, card, { onSession });
	if (foreseen.result === 'declined') throw declined(foreseen.decline, card);
	if (foreseen.result === 'confirm')
		throw declined(
			{
				code: 'subscription_payment_intent_requires_action',
				declineCode: 'authentication_required',
				message: 'Payment for this subscription requires additional user action before it can be completed.',
				final: false
			},
			card
		);
}

/**
 * Carries a planned change out, with its events, and bills what is to be billed at once.
 * @param also what else of the subscription changes with it
 */
export function applyChange(
	world: World,
	subscription: Subscription,
	change: Change,
	plan: Plan,
	also: () => void
): Invoice | undefined {
	world.change('customer.subscription.updated', subscription, () => {
		subscription.items.data = plan.items;
		if (plan.restarted) subscription.billing_cycle_anchor = change.at;
		if (plan.restarted && subscription.cancel_at_period_end)
			subscription.cancel_at = plan.items[0]?.current_period_end ?? null;
		also();
	});
	for (const item of plan.prorations) {
		world.objects.invoiceItems[item.id] = item;
		world.emit('invoiceitem.created', item);
	}
	const customer = world.objects.customers[subscription.customer];
	if (!bills(change, plan) || customer === undefined) return undefined;
	const invoice = draftInvoice(world, {
		customer,
		subscription,
		lines: plan.restarted ? fullLines(world, subscription, plan.items) : [],
		reason: 'subscription_update',
		period: { start: change.at, end: change.at },
		finalizesAt: null
	});
	finalize(world, invoice);
	payInvoice(world, invoice, { onSession: true });
	return invoice;
}
