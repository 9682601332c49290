import type Stripe from 'stripe';
import type { Charge, PaymentIntent, PaymentMethod } from './wire';

/** The `error` of an answer, with what the SDK reads from it. */
export type ErrorBody = {
	type: NonNullable<Stripe.errors.StripeError['rawType']>;
	message: string;
	code?: string;
	param?: string;
	decline_code?: string;
	charge?: Charge['id'];
	doc_url?: string;
	request_log_url?: string;
	payment_intent?: PaymentIntent;
	payment_method?: PaymentMethod;
};

/** An answer of the API that is not a success. */
export class ApiError extends Error {
	constructor(
		readonly status: number,
		readonly body: ErrorBody,
		readonly headers: Record<string, string> = {}
	) {
		super(body.message);
	}
}

export function invalidRequest(message: string, more: { code?: string; param?: string } = {}): ApiError {
	return new ApiError(400, { type: 'invalid_request_error', message, ...more });
}

/** @param what as Stripe calls it in the message, like `customer` @param param which parameter named it, if one did */
export function noSuch(what: string, id: string, param?: string): ApiError {
	return new ApiError(param === undefined || param === 'id' ? 404 : 400, {
		type: 'invalid_request_error',
		code: 'resource_missing',
		message: `No such ${what}: '${id}'`,
		param: param ?? 'id'
	});
}

export function cardError(
	body: Omit<ErrorBody, 'type'> & { code: string; payment_intent?: PaymentIntent }
): ApiError {
	return new ApiError(402, {
		type: 'card_error',
		doc_url: `https://stripe.com/docs/error-codes/${body.code.replaceAll('_', '-')}`,
		...body
	});
}
