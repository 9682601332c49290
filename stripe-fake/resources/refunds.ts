import type { Call, Routes } from '../core/call';
import { invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newId } from '../core/ids';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata } from '../core/params';
import type { List, Refund } from '../core/wire';

/** A refund takes money back; it ends no subscription and changes no invoice. */
function create({ world, params }: Call): Refund {
	const chargeId = params.string('charge');
	const intentId = params.string('payment_intent');
	const amount = params.integer('amount', { least: 1 });
	const reason = params.oneOf('reason', ['duplicate', 'fraudulent', 'requested_by_customer']);
	const metadata = params.metadata();
	if (chargeId === undefined && intentId === undefined) throw params.missing('charge');
	params.done();
	const ofIntent =
		intentId === undefined
			? undefined
			: find(world, 'paymentIntents', intentId, 'payment_intent').latest_charge;
	if (ofIntent === null)
		throw invalidRequest(`This PaymentIntent (${intentId}) does not have a successful charge to refund.`, {
			param: 'payment_intent'
		});
	const charge = find(world, 'charges', chargeId ?? ofIntent ?? '', 'charge');
	if (charge.status !== 'succeeded')
		throw invalidRequest(`Charge ${charge.id} has not succeeded and cannot be refunded.`, {
			param: 'charge'
		});
	const left = charge.amount - charge.amount_refunded;
	if (left === 0)
		throw invalidRequest(`Charge ${charge.id} has already been refunded.`, {
			code: 'charge_already_refunded'
		});
	if (amount !== undefined && amount > left)
		throw invalidRequest(`Refund amount (${amount}) is greater than unrefunded amount on charge (${left})`, {
			param: 'amount'
		});
	const refund: Refund = {
		id: newId('re'),
		object: 'refund',
		amount: amount ?? left,
		balance_transaction: null,
		charge: charge.id,
		created: world.now(charge.customer),
		currency: charge.currency,
		customer: charge.customer,
		customer_account: null,
		destination_details: {
			type: 'card',
			card: { reference_status: 'pending', reference_type: 'acquirer_reference_number', type: 'refund' }
		},
		metadata: mergeMetadata(null, metadata),
		payment_intent: charge.payment_intent,
		payment_method: charge.payment_method,
		reason: reason ?? null,
		receipt_number: null,
		source_transfer_reversal: null,
		status: 'succeeded',
		transfer_reversal: null
	};
	world.objects.refunds[refund.id] = refund;
	world.emit('refund.created', refund);
	world.change('charge.refunded', charge, () => {
		charge.amount_refunded += refund.amount;
		charge.refunded = charge.amount_refunded === charge.amount;
	});
	return refund;
}

function retrieve({ world, params, ids: [id = ''] }: Call): Refund {
	params.done();
	return find(world, 'refunds', id);
}

function list({ world, params }: Call): List<Refund> {
	const charge = params.string('charge');
	const intent = params.string('payment_intent');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.refunds).filter(
		(refund) =>
			(charge === undefined || refund.charge === charge) &&
			(intent === undefined || refund.payment_intent === intent) &&
			isWithin(refund.created, created)
	);
	return pageOf(found, paging, '/v1/refunds', 'refund');
}

export const refunds: Routes = {
	'POST /v1/refunds': create,
	'GET /v1/refunds': list,
	'GET /v1/refunds/:id': retrieve
};
