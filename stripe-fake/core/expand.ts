import { invalidRequest } from './errors';
import { wholeList } from './lists';
import type { ById } from './state';
import type { World } from './world';

type Fields = { [name: string]: unknown };

/** Deepest path that the API expands. */
const deepest = 4;

const isFields = (value: unknown): value is Fields =>
	typeof value === 'object' && value !== null && !Array.isArray(value);

/** @returns whatever object has this id, of a kind that other objects refer to */
function objectOf({ objects }: World, id: string): unknown {
	const kinds: ById<unknown>[] = [
		objects.customers,
		objects.deletedCustomers,
		objects.products,
		objects.prices,
		objects.paymentMethods,
		objects.paymentIntents,
		objects.charges,
		objects.refunds,
		objects.subscriptions,
		objects.invoices
	];
	return kinds.map((kind) => kind[id]).find((found) => found !== undefined);
}

/** Fields that an answer holds only if asked for, by kind of object. */
const onRequest: { [kind: string]: { [field: string]: (world: World, id: string) => unknown } } = {
	'checkout.session': {
		line_items: ({ state }, id) =>
			wholeList(state.checkoutPlans[id]?.lines ?? [], `/v1/checkout/sessions/${id}/line_items`)
	},
	invoice: {
		payments: ({ objects }, id) =>
			wholeList(
				Object.values(objects.invoicePayments).filter(({ invoice }) => invoice === id),
				'/v1/invoice_payments'
			),
		confirmation_secret: ({ objects }, id) => {
			const payment = Object.values(objects.invoicePayments).find(({ invoice }) => invoice === id);
			const intent = objects.paymentIntents[payment?.payment.payment_intent ?? ''];
			return intent === undefined ? null : { client_secret: intent.client_secret, type: 'payment_intent' };
		}
	},
	customer: {
		subscriptions: ({ objects }, id) =>
			wholeList(
				Object.values(objects.subscriptions).filter(
					({ customer, status }) => customer === id && status !== 'canceled'
				),
				`/v1/customers/${id}/subscriptions`
			),
		tax_ids: (_, id) => wholeList([], `/v1/customers/${id}/tax_ids`),
		sources: (_, id) => wholeList([], `/v1/customers/${id}/sources`)
	},
	charge: {
		refunds: ({ objects }, id) =>
			wholeList(
				Object.values(objects.refunds)
					.filter(({ charge }) => charge === id)
					.reverse(),
				`/v1/charges/${id}/refunds`
			)
	}
};

const cannot = (path: string) =>
	invalidRequest(`This property cannot be expanded (${path}).`, { param: 'expand' });

function expandAt(world: World, holder: Fields, parts: string[], whole: string): void {
	const [part = '', ...rest] = parts;
	let value = holder[part];
	if (value === undefined && typeof holder.object === 'string' && typeof holder.id === 'string') {
		value = structuredClone(onRequest[holder.object]?.[part]?.(world, holder.id));
		if (value === undefined) throw cannot(whole);
		holder[part] = value;
	} else if (typeof value === 'string') {
		const found = objectOf(world, value);
		if (found === undefined) throw cannot(whole);
		value = structuredClone(found);
		holder[part] = value;
	} else if (Array.isArray(value)) {
		value = value.map((element: unknown) =>
			typeof element === 'string' ? structuredClone(objectOf(world, element) ?? element) : element
		);
		holder[part] = value;
	} else if (value === undefined || (rest.length === 0 && value !== null && !isFields(value))) {
		throw cannot(whole);
	}
	if (rest.length === 0) return;
	for (const inner of Array.isArray(value) ? value : [value])
		if (isFields(inner)) expandAt(world, inner, rest, whole);
}

/** @throws ApiError 400 where a path is deeper than four levels; `data` of a list is none */
export function requireShallow(paths: string[]): void {
	for (const path of paths)
		if (path.replace(/^data\./, '').split('.').length > deepest)
			throw invalidRequest(`You cannot expand more than ${deepest} levels of a property: ${path}.`, {
				code: 'property_expansion_max_depth',
				param: 'expand'
			});
}

/**
 * A copy of an answer in which the objects at the paths stand in place of their ids.
 * @throws ApiError 400 where there is nothing to expand at a path
 */
export function expand(world: World, answer: object, paths: string[]): object {
	const copy: unknown = structuredClone(answer);
	if (!isFields(copy)) return answer;
	for (const path of paths) expandAt(world, copy, path.split('.'), path);
	return copy;
}
