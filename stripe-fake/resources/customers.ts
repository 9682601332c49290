import { attach } from '../billing/cards-on-file';
import { cancelNow } from '../billing/cancel';
import type { Call, Routes } from '../core/call';
import { invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newId, randomText } from '../core/ids';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata, type Params } from '../core/params';
import type { Customer, DeletedCustomer, List } from '../core/wire';
import type { World } from '../core/world';

type Address = NonNullable<Customer['address']>;

function readAddress(params: Params, name: string): Address | null | undefined {
	if (!params.has(name)) return undefined;
	const given = params.child(name);
	if (given === undefined) return null;
	const part = (field: string) => given.text(field) ?? null;
	return {
		city: part('city'),
		country: part('country'),
		line1: part('line1'),
		line2: part('line2'),
		postal_code: part('postal_code'),
		state: part('state')
	};
}

function readFields(params: Params) {
	const settings = params.child('invoice_settings');
	params.ignore('preferred_locales', 'tax', 'shipping');
	return {
		email: params.text('email'),
		name: params.text('name'),
		description: params.text('description'),
		phone: params.text('phone'),
		address: readAddress(params, 'address'),
		balance: params.integer('balance'),
		metadata: params.metadata(),
		taxExempt: params.oneOf('tax_exempt', ['none', 'exempt', 'reverse']),
		invoicePrefix: params.string('invoice_prefix'),
		defaultPaymentMethod: settings?.text('default_payment_method'),
		footer: settings?.text('footer')
	};
}

function apply(world: World, customer: Customer, given: ReturnType<typeof readFields>): void {
	if (given.email !== undefined) customer.email = given.email;
	if (given.name !== undefined) customer.name = given.name;
	if (given.description !== undefined) customer.description = given.description;
	if (given.phone !== undefined) customer.phone = given.phone;
	if (given.address !== undefined) customer.address = given.address;
	customer.balance = given.balance ?? customer.balance;
	customer.metadata = mergeMetadata(customer.metadata, given.metadata);
	customer.tax_exempt = given.taxExempt ?? customer.tax_exempt;
	customer.invoice_prefix = given.invoicePrefix ?? customer.invoice_prefix;
	if (given.footer !== undefined) customer.invoice_settings.footer = given.footer;
	if (given.defaultPaymentMethod !== undefined)
		customer.invoice_settings.default_payment_method = given.defaultPaymentMethod;
}

/** @param given also by Checkout, for a customer who came without one */
export function newCustomer(world: World, given: { email: string | null; name: string | null }): Customer {
	const customer: Customer = {
		id: newId('cus'),
		object: 'customer',
		address: null,
		balance: 0,
		created: world.now(),
		currency: null,
		customer_account: null,
		default_source: null,
		delinquent: false,
		description: null,
		discount: null,
		email: given.email,
		invoice_prefix: randomText(8).toUpperCase(),
		invoice_settings: {
			custom_fields: null,
			default_payment_method: null,
			footer: null,
			rendering_options: null
		},
		livemode: false,
		metadata: {},
		name: given.name,
		next_invoice_sequence: 1,
		phone: null,
		preferred_locales: [],
		shipping: null,
		tax_exempt: 'none',
		test_clock: null
	};
	world.objects.customers[customer.id] = customer;
	return customer;
}

function create({ world, params }: Call): Customer {
	const given = readFields(params);
	const paymentMethod = params.string('payment_method');
	params.done();
	const customer = newCustomer(world, { email: null, name: null });
	apply(world, customer, { ...given, defaultPaymentMethod: undefined });
	if (paymentMethod !== undefined || given.defaultPaymentMethod != null) {
		// A card that is refused leaves no customer behind.
		try {
			const token = paymentMethod ?? given.defaultPaymentMethod ?? '';
			const attached = attach(world, token, customer.id, 'payment_method');
			if (given.defaultPaymentMethod === token)
				customer.invoice_settings.default_payment_method = attached.id;
			else if (given.defaultPaymentMethod != null) requireOwn(world, customer, given.defaultPaymentMethod);
		} catch (error) {
			Reflect.deleteProperty(world.objects.customers, customer.id);
			throw error;
		}
	}
	world.emit('customer.created', customer);
	return customer;
}

function requireOwn(world: World, customer: Customer, paymentMethod: string): void {
	const param = 'invoice_settings[default_payment_method]';
	if (find(world, 'paymentMethods', paymentMethod, param).customer !== customer.id)
		throw invalidRequest(
			`The customer does not have a payment method with the ID ${paymentMethod}. The payment method must be attached to the customer.`,
			{ code: 'resource_missing', param }
		);
}

function update({ world, params, ids: [id = ''] }: Call): Customer {
	const customer = find(world, 'customers', id);
	const given = readFields(params);
	params.done();
	if (given.defaultPaymentMethod != null) requireOwn(world, customer, given.defaultPaymentMethod);
	world.change('customer.updated', customer, () => apply(world, customer, given));
	return customer;
}

function retrieve({ world, params, ids: [id = ''] }: Call): Customer | DeletedCustomer {
	params.done();
	return find(
		world,
		Object.hasOwn(world.objects.deletedCustomers, id) ? 'deletedCustomers' : 'customers',
		id
	);
}

function list({ world, params }: Call): List<Customer> {
	const email = params.string('email');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.customers).filter(
		(customer) => (email === undefined || customer.email === email) && isWithin(customer.created, created)
	);
	return pageOf(found, paging, '/v1/customers', 'customer');
}

/** Ends what the customer subscribes to; a stub stays, so that the id still answers. */
function remove({ world, params, ids: [id = ''] }: Call): DeletedCustomer {
	const customer = find(world, 'customers', id);
	params.done();
	for (const subscription of Object.values(world.objects.subscriptions))
		if (subscription.customer === id && subscription.ended_at === null)
			cancelNow(world, subscription, 'cancellation_requested');
	for (const paymentMethod of Object.values(world.objects.paymentMethods))
		if (paymentMethod.customer === id) paymentMethod.customer = null;
	Reflect.deleteProperty(world.objects.customers, id);
	world.emit('customer.deleted', customer);
	const stub: DeletedCustomer = { id, object: 'customer', deleted: true };
	world.objects.deletedCustomers[id] = stub;
	return stub;
}

export const customers: Routes = {
	'POST /v1/customers': create,
	'GET /v1/customers': list,
	'GET /v1/customers/:id': retrieve,
	'POST /v1/customers/:id': update,
	'DELETE /v1/customers/:id': remove
};
