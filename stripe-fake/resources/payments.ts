import type { Call, Routes } from '../core/call';
import { find } from '../core/find';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata } from '../core/params';
import type { Charge, List, PaymentIntent } from '../core/wire';

function retrieveIntent({ world, params, ids: [id = ''] }: Call): PaymentIntent {
	params.ignore('client_secret');
	params.done();
	return find(world, 'paymentIntents', id);
}

function updateIntent({ world, params, ids: [id = ''] }: Call): PaymentIntent {
	const intent = find(world, 'paymentIntents', id);
	const metadata = params.metadata();
	const description = params.text('description');
	params.done();
	intent.metadata = mergeMetadata(intent.metadata, metadata);
	if (description !== undefined) intent.description = description;
	return intent;
}

function listIntents({ world, params }: Call): List<PaymentIntent> {
	const customer = params.string('customer');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.paymentIntents).filter(
		(intent) => (customer === undefined || intent.customer === customer) && isWithin(intent.created, created)
	);
	return pageOf(found, paging, '/v1/payment_intents', 'payment_intent');
}

function retrieveCharge({ world, params, ids: [id = ''] }: Call): Charge {
	params.done();
	return find(world, 'charges', id);
}

function listCharges({ world, params }: Call): List<Charge> {
	const customer = params.string('customer');
	const intent = params.string('payment_intent');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.charges).filter(
		(charge) =>
			(customer === undefined || charge.customer === customer) &&
			(intent === undefined || charge.payment_intent === intent) &&
			isWithin(charge.created, created)
	);
	return pageOf(found, paging, '/v1/charges', 'charge');
}

export const payments: Routes = {
	'GET /v1/payment_intents': listIntents,
	'GET /v1/payment_intents/:id': retrieveIntent,
	'POST /v1/payment_intents/:id': updateIntent,
	'GET /v1/charges': listCharges,
	'GET /v1/charges/:id': retrieveCharge
};
