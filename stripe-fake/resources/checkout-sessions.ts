import { lineAmount } from '../billing/lines';
import { requireRecurring } from '../billing/subscribe';
import type { Call, Routes } from '../core/call';
import { invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newId } from '../core/ids';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata } from '../core/params';
import type { CheckoutLine, CheckoutSession, List, Price } from '../core/wire';
import type { World } from '../core/world';

const day = 86_400;
const halfHour = 1800;

function lineOf(world: World, price: Price, quantity: number): CheckoutLine {
	const amount = lineAmount(price, quantity);
	return {
		id: newId('li'),
		object: 'item',
		adjustable_quantity: null,
		amount_discount: 0,
		amount_subtotal: amount,
		amount_tax: 0,
		amount_total: amount,
		currency: price.currency,
		description: world.objects.products[price.product]?.name ?? null,
		metadata: {},
		price: structuredClone(price),
		quantity
	};
}

function readGiven({ params }: Call) {
	const mode = params.oneOf('mode', ['payment', 'subscription']);
	if (mode === undefined) throw params.missing('mode');
	const lines = (params.list('line_items') ?? []).map((line) => {
		const adjustable = line.child('adjustable_quantity');
		adjustable?.ignore('enabled', 'minimum', 'maximum');
		return { price: line.required('price'), quantity: line.integer('quantity', { least: 1 }) };
	});
	if (lines.length === 0) throw params.missing('line_items');
	const subscriptionData = mode === 'subscription' ? params.child('subscription_data') : undefined;
	const intentData = mode === 'payment' ? params.child('payment_intent_data') : undefined;
	const subscriptionMetadata = mergeMetadata(null, subscriptionData?.metadata());
	const intentMetadata = mergeMetadata(null, intentData?.metadata());
	const description = subscriptionData?.text('description') ?? intentData?.text('description') ?? null;
	subscriptionData?.child('billing_mode')?.oneOf('type', ['flexible']);
	intentData?.oneOf('setup_future_usage', ['off_session', 'on_session']);
	params.child('automatic_tax')?.boolean('enabled');
	params.child('tax_id_collection')?.boolean('enabled');
	params.child('customer_update')?.ignore('address', 'name', 'shipping');
	return {
		mode,
		lines,
		subscriptionMetadata,
		intentMetadata,
		description,
		customer: params.string('customer'),
		customerEmail: params.string('customer_email'),
		customerCreation:
			mode === 'payment' ? params.oneOf('customer_creation', ['always', 'if_required']) : null,
		reference: params.text('client_reference_id') ?? null,
		metadata: mergeMetadata(null, params.metadata()),
		successUrl: params.string('success_url'),
		cancelUrl: params.string('cancel_url') ?? null,
		expiresAt: params.integer('expires_at'),
		uiMode: params.oneOf('ui_mode', ['hosted_page']) ?? 'hosted_page',
		locale: params.string('locale') ?? null,
		promotions: params.boolean('allow_promotion_codes') ?? null,
		addressCollection: params.oneOf('billing_address_collection', ['auto', 'required']) ?? null,
		submitType: params.oneOf('submit_type', ['auto', 'book', 'donate', 'pay', 'subscribe']) ?? null,
		collection: params.oneOf('payment_method_collection', ['always', 'if_required'])
	};
}

function requireAddress(value: string | null, param: string): void {
	if (value !== null && !/^https?:\/\/[^\s]+$/.test(value))
		throw invalidRequest('Not a valid URL', { code: 'url_invalid', param });
}

/** @throws ApiError where the lines do not fit the mode */
function requireFitting(mode: 'payment' | 'subscription', prices: Price[]): void {
	if (mode === 'payment') {
		const recurring = prices.findIndex(({ type }) => type === 'recurring');
		if (recurring >= 0)
			throw invalidRequest(
				'You specified `payment` mode but passed a recurring price. Either switch to `subscription` mode or use only one-time prices.',
				{ param: `line_items[${recurring}][price]` }
			);
	} else if (prices.every(({ type }) => type !== 'recurring'))
		throw invalidRequest(
			'You must provide at least one recurring price in `subscription` mode when using prices.',
			{ param: 'line_items' }
		);
	if (mode === 'subscription') requireRecurring(prices, (index) => `line_items[${index}][price]`);
	prices.forEach(({ active, currency }, index) => {
		if (!active)
			throw invalidRequest('The price specified is inactive. This field only accepts active prices.', {
				param: `line_items[${index}][price]`
			});
		if (currency !== prices[0]?.currency)
			throw invalidRequest('All prices on a Checkout Session must have the same currency.', {
				param: `line_items[${index}][price]`
			});
	});
}

function create(call: Call): CheckoutSession {
	const { world, params } = call;
	const given = readGiven(call);
	if (given.successUrl === undefined) throw params.missing('success_url');
	if (given.customer !== undefined && given.customerEmail !== undefined)
		throw invalidRequest('You may only specify one of these parameters: customer, customer_email.');
	requireAddress(given.successUrl, 'success_url');
	requireAddress(given.cancelUrl, 'cancel_url');
	const now = world.now(given.customer);
	const expiresAt = given.expiresAt ?? now + day;
	// A minute of grace, as the sender's clock is another one.
	if (expiresAt < now + halfHour - 60 || expiresAt > now + day + 60)
		throw params.refuse(
			'expires_at',
			'The `expires_at` timestamp must be between 30 minutes and 24 hours from Checkout Session creation.'
		);
	params.done();
	const customer = given.customer === undefined ? null : find(world, 'customers', given.customer, 'customer');
	const prices = given.lines.map(({ price }, index) =>
		find(world, 'prices', price, `line_items[${index}][price]`)
	);
	requireFitting(given.mode, prices);
	const lines = prices.map((price, index) => lineOf(world, price, given.lines[index]?.quantity ?? 1));
	const total = lines.reduce((sum, { amount_total }) => sum + amount_total, 0);
	const id = newId('cs_test');
	const session: CheckoutSession = {
		id,
		object: 'checkout.session',
		adaptive_pricing: { enabled: false },
		after_expiration: null,
		allow_promotion_codes: given.promotions,
		allowed_payment_method_types: null,
		amount_subtotal: total,
		amount_total: total,
		automatic_tax: { enabled: false, liability: null, provider: null, status: null },
		billing_address_collection: given.addressCollection,
		cancel_url: given.cancelUrl,
		client_reference_id: given.reference,
		client_secret: null,
		collected_information: null,
		consent: null,
		consent_collection: null,
		created: now,
		currency: prices[0]?.currency ?? null,
		currency_conversion: null,
		custom_fields: [],
		custom_text: {
			after_submit: null,
			shipping_address: null,
			submit: null,
			terms_of_service_acceptance: null
		},
		customer: customer?.id ?? null,
		customer_account: null,
		customer_creation: given.mode === 'payment' ? (given.customerCreation ?? 'if_required') : null,
		customer_details:
			customer === null && given.customerEmail === undefined
				? null
				: {
						address: null,
						business_name: null,
						email: customer?.email ?? given.customerEmail ?? null,
						individual_name: null,
						name: null,
						phone: null,
						tax_exempt: customer?.tax_exempt ?? 'none',
						tax_ids: null
					},
		customer_email: given.customerEmail ?? null,
		discounts: [],
		expires_at: expiresAt,
		integration_identifier: null,
		invoice: null,
		invoice_creation:
			given.mode === 'payment'
				? {
						enabled: false,
						invoice_data: {
							account_tax_ids: null,
							custom_fields: null,
							description: null,
							footer: null,
							issuer: null,
							metadata: {},
							rendering_options: null
						}
					}
				: null,
		livemode: false,
		locale: given.locale,
		managed_payments: null,
		metadata: given.metadata,
		mode: given.mode,
		origin_context: null,
		payment_intent: null,
		payment_link: null,
		payment_method_collection: given.mode === 'subscription' ? (given.collection ?? 'always') : 'if_required',
		payment_method_configuration_details: null,
		payment_method_options: { card: { request_three_d_secure: 'automatic' } },
		payment_method_types: ['card'],
		payment_status: 'unpaid',
		permissions: null,
		phone_number_collection: { enabled: false },
		recovered_from: null,
		saved_payment_method_options: null,
		setup_intent: null,
		shipping_address_collection: null,
		shipping_cost: null,
		shipping_options: [],
		status: 'open',
		submit_type: given.submitType,
		subscription: null,
		success_url: given.successUrl,
		total_details: { amount_discount: 0, amount_shipping: 0, amount_tax: 0 },
		ui_mode: given.uiMode,
		url: `${world.state.base}/checkout/${id}`,
		wallet_options: null
	};
	world.objects.checkoutSessions[id] = session;
	world.state.checkoutPlans[id] = {
		lines,
		subscriptionMetadata: given.subscriptionMetadata,
		intentMetadata: given.intentMetadata,
		description: given.description,
		pendingPaymentMethod: null
	};
	return session;
}

export function expireSession(world: World, session: CheckoutSession): void {
	session.status = 'expired';
	session.url = null;
	world.emit('checkout.session.expired', session);
}

function expire({ world, params, ids: [id = ''] }: Call): CheckoutSession {
	const session = find(world, 'checkoutSessions', id);
	params.done();
	if (session.status !== 'open')
		throw invalidRequest(
			`Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of \`${session.status}\`.`
		);
	expireSession(world, session);
	return session;
}

function retrieve({ world, params, ids: [id = ''] }: Call): CheckoutSession {
	params.done();
	return find(world, 'checkoutSessions', id);
}

function list({ world, params }: Call): List<CheckoutSession> {
	const customer = params.string('customer');
	const subscription = params.string('subscription');
	const intent = params.string('payment_intent');
	const status = params.oneOf('status', ['complete', 'expired', 'open']);
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.checkoutSessions).filter(
		(session) =>
			(customer === undefined || session.customer === customer) &&
			(subscription === undefined || session.subscription === subscription) &&
			(intent === undefined || session.payment_intent === intent) &&
			(status === undefined || session.status === status) &&
			isWithin(session.created, created)
	);
	return pageOf(found, paging, '/v1/checkout/sessions', 'checkout.session');
}

function listLines({ world, params, ids: [id = ''] }: Call): List<CheckoutLine> {
	find(world, 'checkoutSessions', id);
	const paging = readPaging(params);
	params.done();
	const lines = world.state.checkoutPlans[id]?.lines ?? [];
	return pageOf(lines, paging, `/v1/checkout/sessions/${id}/line_items`, 'item');
}

export const checkoutSessions: Routes = {
	'POST /v1/checkout/sessions': create,
	'GET /v1/checkout/sessions': list,
	'GET /v1/checkout/sessions/:id': retrieve,
	'POST /v1/checkout/sessions/:id/expire': expire,
	'GET /v1/checkout/sessions/:id/line_items': listLines
};
