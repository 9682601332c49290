import { cardForToken, cardNumbered } from '../billing/cards';
import { attach, newPaymentMethod, paymentMethodFor } from '../billing/cards-on-file';
import type { Call, Routes } from '../core/call';
import { cardError, invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newestFirst, pageOf, readPaging } from '../core/lists';
import type { List, PaymentMethod } from '../core/wire';

function create({ world, params }: Call): PaymentMethod {
	params.oneOf('type', ['card']);
	const given = params.child('card');
	if (given === undefined) throw params.missing('card');
	const token = given.string('token');
	const number = given.string('number')?.replace(/\s/g, '');
	const expMonth = given.integer('exp_month');
	const expYear = given.integer('exp_year');
	given.ignore('cvc');
	const details = params.child('billing_details');
	const entry = {
		...(expMonth === undefined ? {} : { expMonth }),
		...(expYear === undefined ? {} : { expYear }),
		name: details?.text('name') ?? null,
		email: details?.text('email') ?? null
	};
	params.done();
	if (token === undefined && number === undefined) throw given.missing('token');
	const card = token === undefined ? cardNumbered(number ?? '') : cardForToken(token);
	if (card === undefined)
		throw cardError({
			code: 'card_declined',
			decline_code: 'test_mode_live_card',
			message:
				'Your card was declined. Your request was in test mode, but used a non test card. For a list of valid test cards, visit: https://stripe.com/docs/testing.'
		});
	return newPaymentMethod(world, card, entry);
}

function retrieve({ world, params, ids: [id = ''] }: Call): PaymentMethod {
	params.done();
	return paymentMethodFor(world, id, 'id');
}

function attachTo({ world, params, ids: [id = ''] }: Call): PaymentMethod {
	const customer = params.required('customer');
	params.done();
	find(world, 'customers', customer, 'customer');
	return attach(world, id, customer, 'id');
}

function detach({ world, params, ids: [id = ''] }: Call): PaymentMethod {
	const paymentMethod = find(world, 'paymentMethods', id);
	params.done();
	const customer = world.objects.customers[paymentMethod.customer ?? ''];
	if (customer === undefined)
		throw invalidRequest(
			'The payment method you provided is not attached to a customer so detachment is impossible.',
			{ code: 'payment_method_unexpected_state' }
		);
	world.change('payment_method.detached', paymentMethod, () => {
		paymentMethod.customer = null;
	});
	if (customer.invoice_settings.default_payment_method === id)
		world.change('customer.updated', customer, () => {
			customer.invoice_settings.default_payment_method = null;
		});
	for (const subscription of Object.values(world.objects.subscriptions))
		if (subscription.default_payment_method === id && subscription.ended_at === null)
			world.change('customer.subscription.updated', subscription, () => {
				subscription.default_payment_method = null;
			});
	return paymentMethod;
}

function list({ world, params }: Call): List<PaymentMethod> {
	const customer = params.string('customer');
	params.oneOf('type', ['card']);
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.paymentMethods).filter(
		(paymentMethod) => customer !== undefined && paymentMethod.customer === customer
	);
	return pageOf(found, paging, '/v1/payment_methods', 'PaymentMethod');
}

function listOf({ world, params, ids: [id = ''] }: Call): List<PaymentMethod> {
	find(world, 'customers', id);
	params.oneOf('type', ['card']);
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.paymentMethods).filter(({ customer }) => customer === id);
	return pageOf(found, paging, `/v1/customers/${id}/payment_methods`, 'PaymentMethod');
}

export const paymentMethods: Routes = {
	'POST /v1/payment_methods': create,
	'GET /v1/payment_methods': list,
	'GET /v1/payment_methods/:id': retrieve,
	'POST /v1/payment_methods/:id/attach': attachTo,
	'POST /v1/payment_methods/:id/detach': detach,
	'GET /v1/customers/:id/payment_methods': listOf
};
