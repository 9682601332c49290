import { newId } from '../core/ids';
import type { InvoiceItem, InvoiceLine, Price, Subscription, SubscriptionItem } from '../core/wire';
import type { World } from '../core/world';
import { asDay, asMoney } from './money';

export type Period = { start: number; end: number };

export const lineAmount = (price: Price, quantity: number): number => (price.unit_amount ?? 0) * quantity;

function productName(world: World, price: Price): string {
	return world.objects.products[price.product]?.name ?? price.product;
}

const line = (
	given: Pick<InvoiceLine, 'amount' | 'currency' | 'description' | 'parent' | 'period' | 'subscription'> & {
		price: Price;
		quantity: number;
		metadata: Record<string, string>;
	}
): InvoiceLine => ({
	id: newId('il'),
	object: 'line_item',
	amount: given.amount,
	currency: given.currency,
	description: given.description,
	discount_amounts: [],
	discountable: true,
	discounts: [],
	invoice: null,
	livemode: false,
	metadata: given.metadata,
	parent: given.parent,
	period: given.period,
	pretax_credit_amounts: [],
	pricing: {
		type: 'price_details',
		price_details: { price: given.price.id, product: given.price.product },
		unit_amount_decimal: given.price.unit_amount_decimal
	},
	quantity: given.quantity,
	quantity_decimal: String(given.quantity),
	subscription: given.subscription,
	subtotal: given.amount,
	taxes: []
});

/** What an item costs for a whole period. */
export function cycleLine(
	world: World,
	subscription: Subscription,
	item: SubscriptionItem,
	period: Period
): InvoiceLine {
	const quantity = item.quantity ?? 1;
	const each = asMoney(item.price.unit_amount ?? 0, item.price.currency);
	const per = item.price.recurring?.interval ?? 'once';
	return line({
		price: item.price,
		quantity,
		amount: lineAmount(item.price, quantity),
		currency: subscription.currency,
		description: `${quantity} × ${productName(world, item.price)} (at ${each} / ${per})`,
		metadata: { ...subscription.metadata },
		period,
		subscription: subscription.id,
		parent: {
			type: 'subscription_item_details',
			invoice_item_details: null,
			subscription_item_details: {
				invoice_item: null,
				proration: false,
				proration_details: { credited_items: null },
				subscription: subscription.id,
				subscription_item: item.id
			}
		}
	});
}

/** Share of a period that is left, to the second. */
const shareLeft = ({ start, end }: Period, at: number): number =>
	end <= start ? 0 : Math.min(1, Math.max(0, (end - at) / (end - start)));

/** An item that is to be billed or credited for the rest of a period. @param sign -1 for a credit */
export function prorationItem(
	world: World,
	subscription: Subscription,
	item: SubscriptionItem,
	at: number,
	sign: 1 | -1
): InvoiceItem {
	const period = { start: item.current_period_start, end: item.current_period_end };
	const quantity = item.quantity ?? 1;
	const amount = sign * Math.round(lineAmount(item.price, quantity) * shareLeft(period, at));
	const what = `${quantity} × ${productName(world, item.price)}`;
	return {
		id: newId('ii'),
		object: 'invoiceitem',
		amount,
		currency: subscription.currency,
		customer: subscription.customer,
		customer_account: null,
		date: at,
		description: `${sign < 0 ? 'Unused time on' : 'Remaining time on'} ${what} after ${asDay(at)}`,
		discountable: false,
		discounts: [],
		invoice: null,
		livemode: false,
		metadata: {},
		net_amount: amount,
		parent: {
			type: 'subscription_details',
			subscription_details: { subscription: subscription.id, subscription_item: item.id }
		},
		period: { start: at, end: period.end },
		pricing: {
			type: 'price_details',
			price_details: { price: item.price.id, product: item.price.product },
			unit_amount_decimal: item.price.unit_amount_decimal
		},
		proration: true,
		proration_details: { credited_items: null, discount_amounts: [] },
		quantity,
		quantity_decimal: String(quantity),
		tax_rates: [],
		test_clock: null
	};
}

/** The line of an invoice that bills a pending item. */
export function lineOfItem(world: World, item: InvoiceItem): InvoiceLine {
	const details = item.parent?.subscription_details;
	const price = world.objects.prices[item.pricing?.price_details?.price ?? ''];
	if (price === undefined || details?.subscription_item === undefined)
		throw new Error(`${item.id} is no proration of a subscription`);
	return {
		...line({
			price,
			quantity: item.quantity,
			amount: item.amount,
			currency: item.currency,
			description: item.description,
			metadata: {},
			period: item.period,
			subscription: details.subscription,
			parent: {
				type: 'subscription_item_details',
				invoice_item_details: null,
				subscription_item_details: {
					invoice_item: item.id,
					proration: true,
					proration_details: { credited_items: null },
					subscription: details.subscription,
					subscription_item: details.subscription_item
				}
			}
		}),
		discountable: false
	};
}
