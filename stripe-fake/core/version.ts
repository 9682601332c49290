import type Stripe from 'stripe';

/** The one version of the API that is spoken here: that of the SDK, whose types every answer is checked against. */
export const apiVersion = '2026-10-28.endive' satisfies NonNullable<Stripe.StripeConfig['apiVersion']>;
