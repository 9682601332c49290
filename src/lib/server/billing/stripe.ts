import Stripe from 'stripe';
import { env } from '../env';
import { PaymentsAwayError } from './errors';

/** The one version that requests, the webhook's endpoint and this code agree on. */
export const apiVersion = '2026-10-28.endive';

let client: Stripe | undefined;

/** The payment service's own library, set up from the environment; the same against its stand-in. */
export function stripe(): Stripe {
	if (client === undefined) {
		const { STRIPE_SECRET_KEY, STRIPE_API_URL } = env();
		client = new Stripe(STRIPE_SECRET_KEY, {
			apiVersion,
			telemetry: false,
			maxNetworkRetries: 2,
			timeout: 10_000,
			...placeOf(STRIPE_API_URL)
		});
	}
	return client;
}

function placeOf(address: string | undefined): Stripe.StripeConfig {
	if (address === undefined) return {};
	const { hostname, port, protocol } = new URL(address);
	const scheme = protocol === 'https:' ? 'https' : 'http';
	return { host: hostname, protocol: scheme, port: port || (scheme === 'https' ? 443 : 80) };
}

/** Whether real money moves: test and live keys are told apart by their names. */
export function isLive(): boolean {
	return /^[rs]k_live_/.test(env().STRIPE_SECRET_KEY);
}

/** Id of what the payment service gives as an id or as the thing itself. */
export function idOf(reference: string | { id: string } | null | undefined): string | null {
	if (reference === null || reference === undefined) return null;
	return typeof reference === 'string' ? reference : reference.id;
}

/** @param seconds since 1970, as the payment service counts */
export const instantOf = (seconds: number): Date => new Date(seconds * 1000);

/** Whether the payment service says that there is no such thing. */
export function isMissing(cause: unknown): boolean {
	return cause instanceof Stripe.errors.StripeInvalidRequestError && cause.statusCode === 404;
}

/** Whether the payment service was not reached or is not well: trying again may help. */
function isAway(cause: unknown): boolean {
	return (
		cause instanceof Stripe.errors.StripeConnectionError ||
		cause instanceof Stripe.errors.StripeAPIError ||
		cause instanceof Stripe.errors.StripeRateLimitError
	);
}

/** Awaits what a person asked of the payment service. @throws PaymentsAwayError where trying again may help */
export async function orAway<T>(work: Promise<T>): Promise<T> {
	try {
		return await work;
	} catch (cause) {
		if (isAway(cause)) throw new PaymentsAwayError({ cause });
		throw cause;
	}
}
