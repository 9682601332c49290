import { newId, randomText } from '../core/ids';
import type { Charge, PaymentIntent, PaymentMethod } from '../core/wire';
import type { World } from '../core/world';
import { authenticationRequired, chargeCard, type Decline } from './cards';
import { cardOf } from './cards-on-file';

export type Attempt = {
	/** Whether the customer is there, at a page. */
	onSession: boolean;
	/** Whether the customer has just confirmed the payment with the card's issuer. */
	confirmed?: boolean;
	/** Keep the card for payments without the customer. */
	setUp?: boolean;
	/** The customer has just typed the card in: it is not a kept one, even where it is being kept with this payment. */
	typedIn?: boolean;
};

export type Outcome =
	| { result: 'paid'; charge: Charge }
	| { result: 'confirm' }
	| { result: 'declined'; decline: Decline; charge: Charge | null };

export function newIntent(
	world: World,
	given: {
		amount: number;
		currency: string;
		customer: string | null;
		description: string | null;
		metadata?: Record<string, string>;
		setUp?: boolean;
	}
): PaymentIntent {
	const id = newId('pi');
	const intent: PaymentIntent = {
		id,
		object: 'payment_intent',
		allowed_payment_method_types: null,
		amount: given.amount,
		amount_capturable: 0,
		amount_details: { tip: {} },
		amount_received: 0,
		application: null,
		application_fee_amount: null,
		automatic_payment_methods: null,
		canceled_at: null,
		cancellation_reason: null,
		capture_method: 'automatic',
		client_secret: `${id}_secret_${randomText(25)}`,
		confirmation_method: 'automatic',
		created: world.now(given.customer),
		currency: given.currency,
		customer: given.customer,
		customer_account: null,
		description: given.description,
		excluded_payment_method_types: null,
		last_payment_error: null,
		latest_charge: null,
		livemode: false,
		managed_payments: null,
		metadata: { ...given.metadata },
		next_action: null,
		on_behalf_of: null,
		payment_method: null,
		payment_method_configuration_details: null,
		payment_method_options: null,
		payment_method_types: ['card'],
		payment_record: null,
		processing: null,
		receipt_email: null,
		review: null,
		setup_future_usage: given.setUp === true ? 'off_session' : null,
		shipping: null,
		source: null,
		statement_descriptor: null,
		statement_descriptor_suffix: null,
		status: 'requires_payment_method',
		transfer_data: null,
		transfer_group: null
	};
	world.objects.paymentIntents[id] = intent;
	world.emit('payment_intent.created', intent);
	return intent;
}

function newCharge(
	world: World,
	intent: PaymentIntent,
	paymentMethod: PaymentMethod,
	decline: Decline | null
) {
	const card = paymentMethod.card;
	const id = newId('ch');
	const charge: Charge = {
		id,
		object: 'charge',
		amount: intent.amount,
		amount_captured: decline === null ? intent.amount : 0,
		amount_refunded: 0,
		application: null,
		application_fee: null,
		application_fee_amount: null,
		balance_transaction: null,
		billing_details: paymentMethod.billing_details,
		calculated_statement_descriptor: null,
		captured: decline === null,
		created: world.now(intent.customer),
		currency: intent.currency,
		customer: intent.customer,
		description: intent.description,
		disputed: false,
		failure_balance_transaction: null,
		failure_code: decline?.code ?? null,
		failure_message: decline?.message ?? null,
		fraud_details: {},
		livemode: false,
		metadata: { ...intent.metadata },
		on_behalf_of: null,
		outcome: {
			advice_code: decline === null ? null : decline.final ? 'do_not_try_again' : 'try_again_later',
			network_advice_code: null,
			network_decline_code: null,
			network_status: decline === null ? 'approved_by_network' : 'declined_by_network',
			reason: decline?.declineCode ?? null,
			risk_level: 'normal',
			seller_message: decline === null ? 'Payment complete.' : decline.message,
			type: decline === null ? 'authorized' : 'issuer_declined'
		},
		paid: decline === null,
		payment_intent: intent.id,
		payment_method: paymentMethod.id,
		payment_method_details: {
			type: 'card',
			card: {
				amount_authorized: decline === null ? intent.amount : null,
				authorization_code: null,
				brand: card?.brand ?? null,
				checks: card?.checks ?? null,
				country: card?.country ?? null,
				electronic_commerce_indicator: null,
				exp_month: card?.exp_month ?? 1,
				exp_year: card?.exp_year ?? 2000,
				fingerprint: card?.fingerprint ?? null,
				funding: card?.funding ?? null,
				installments: null,
				last4: card?.last4 ?? null,
				mandate: null,
				network: card?.brand ?? null,
				network_transaction_id: null,
				regulated_status: card?.regulated_status ?? null,
				three_d_secure: null,
				transaction_link_id: null,
				wallet: null
			}
		},
		receipt_email: null,
		receipt_number: null,
		receipt_url: null,
		refunded: false,
		review: null,
		shipping: null,
		source: null,
		source_transfer: null,
		statement_descriptor: null,
		statement_descriptor_suffix: null,
		status: decline === null ? 'succeeded' : 'failed',
		transfer_data: null,
		transfer_group: null
	};
	world.objects.charges[id] = charge;
	world.emit(decline === null ? 'charge.succeeded' : 'charge.failed', charge);
	return charge;
}

/** What charging a card would come to, without charging it. */
export function foresee(world: World, paymentMethod: PaymentMethod, attempt: Attempt) {
	return chargeCard(cardOf(world, paymentMethod.id), {
		onSession: attempt.onSession,
		confirmed: attempt.confirmed ?? false,
		setUp: world.state.cards[paymentMethod.id]?.setUp ?? false,
		kept: attempt.typedIn !== true && paymentMethod.customer !== null
	});
}

function fail(world: World, intent: PaymentIntent, paymentMethod: PaymentMethod, decline: Decline): Charge {
	const charge = newCharge(world, intent, paymentMethod, decline);
	intent.latest_charge = charge.id;
	intent.status = 'requires_payment_method';
	intent.payment_method = null;
	intent.next_action = null;
	intent.last_payment_error = {
		type: 'card_error',
		charge: charge.id,
		code: decline.code,
		decline_code: decline.declineCode,
		doc_url: `https://stripe.com/docs/error-codes/${decline.code.replaceAll('_', '-')}`,
		message: decline.message,
		payment_method: paymentMethod
	};
	world.emit('payment_intent.payment_failed', intent);
	return charge;
}

/** Charges a card, with the events and objects that follow from it. */
export function collect(
	world: World,
	intent: PaymentIntent,
	paymentMethod: PaymentMethod,
	attempt: Attempt
): Outcome {
	const foreseen = foresee(world, paymentMethod, attempt);
	if (foreseen.result === 'confirm') {
		intent.status = 'requires_action';
		intent.payment_method = paymentMethod.id;
		intent.next_action = { type: 'use_stripe_sdk', use_stripe_sdk: {} };
		world.emit('payment_intent.requires_action', intent);
		return { result: 'confirm' };
	}
	if (foreseen.result === 'declined')
		return {
			result: 'declined',
			decline: foreseen.decline,
			charge: fail(world, intent, paymentMethod, foreseen.decline)
		};
	const charge = newCharge(world, intent, paymentMethod, null);
	intent.status = 'succeeded';
	intent.amount_received = intent.amount;
	intent.latest_charge = charge.id;
	intent.last_payment_error = null;
	intent.next_action = null;
	intent.payment_method = paymentMethod.id;
	const kept = world.state.cards[paymentMethod.id];
	if (kept !== undefined && attempt.setUp === true) kept.setUp = true;
	world.emit('payment_intent.succeeded', intent);
	if (cardOf(world, paymentMethod.id).disputed) charge.disputed = true;
	return { result: 'paid', charge };
}

/** A customer who refuses to confirm, or nobody there to do so. */
export function failConfirmation(world: World, intent: PaymentIntent, paymentMethod: PaymentMethod): void {
	fail(world, intent, paymentMethod, authenticationRequired);
}
