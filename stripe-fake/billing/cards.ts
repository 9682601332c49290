/*
 * The published test cards: numbers and what happens with each. Numbers and outcomes of the cards marked "from memory"
 * were not looked up again.
 */

/** Why an issuer says no: `code` of the error, `decline_code`, and what the customer is told. */
export type Decline = { code: string; declineCode: string; message: string; final: boolean };

const declines = {
	generic: {
		code: 'card_declined',
		declineCode: 'generic_decline',
		message: 'Your card was declined.',
		final: false
	},
	funds: {
		code: 'card_declined',
		declineCode: 'insufficient_funds',
		message: 'Your card has insufficient funds.',
		final: false
	},
	lost: {
		code: 'card_declined',
		declineCode: 'lost_card',
		message: 'Your card was declined.',
		final: true
	},
	stolen: {
		code: 'card_declined',
		declineCode: 'stolen_card',
		message: 'Your card was declined.',
		final: true
	},
	expired: {
		code: 'expired_card',
		declineCode: 'expired_card',
		message: 'Your card has expired.',
		final: false
	},
	cvc: {
		code: 'incorrect_cvc',
		declineCode: 'incorrect_cvc',
		message: "Your card's security code is incorrect.",
		final: false
	},
	processing: {
		code: 'processing_error',
		declineCode: 'processing_error',
		message: 'An error occurred while processing your card. Try again in a little bit.',
		final: false
	}
} as const satisfies { [name: string]: Decline };

export const authenticationRequired: Decline = {
	code: 'authentication_required',
	declineCode: 'authentication_required',
	message: 'Your card was declined. This transaction requires authentication.',
	final: false
};

/**
 * `never`; `until set up`: unless it was set up for payments without the customer; `always`; `on session`: only while
 * the customer is there.
 */
export type Confirmation = 'never' | 'until set up' | 'always' | 'on session';

export type Card = {
	number: string;
	brand: 'visa' | 'mastercard';
	/** Names by which the API's tests call it. */
	tokens: string[];
	/** In words, for the list on the page. */
	outcome: string;
	confirmation: Confirmation;
	/** What the issuer says to a charge, once confirmed where that is needed. */
	decline: Decline | null;
	/** The decline comes at once, so that the card cannot even be kept. */
	refusedWhenAttached: boolean;
	/** The charge succeeds only while the customer pays on a page: charges of the kept card fail. */
	failsOnceKept: boolean;
	disputed: boolean;
};

const card = (
	number: string,
	outcome: string,
	more: Partial<Omit<Card, 'number' | 'outcome'>> = {}
): Card => ({
	number,
	outcome,
	brand: 'visa',
	tokens: [],
	confirmation: 'never',
	decline: null,
	refusedWhenAttached: (more.decline ?? null) !== null && (more.confirmation ?? 'never') === 'never',
	failsOnceKept: false,
	disputed: false,
	...more
});

export const cards: readonly Card[] = [
	card('4242424242424242', 'pays', { tokens: ['visa', 'us'] }),
	card('5555555555554444', 'pays', { tokens: ['mastercard'], brand: 'mastercard' }),
	card('4000000000000002', 'is declined', {
		tokens: ['chargeDeclined', 'visa_chargeDeclined'],
		decline: declines.generic
	}),
	card('4000000000009995', 'is declined: insufficient funds', {
		tokens: ['chargeDeclinedInsufficientFunds', 'visa_chargeDeclinedInsufficientFunds'],
		decline: declines.funds
	}),
	card('4000000000009987', 'is declined: lost card', {
		tokens: ['chargeDeclinedLostCard', 'visa_chargeDeclinedLostCard'],
		decline: declines.lost
	}),
	card('4000000000009979', 'is declined: stolen card', {
		tokens: ['chargeDeclinedStolenCard', 'visa_chargeDeclinedStolenCard'],
		decline: declines.stolen
	}),
	card('4000000000000069', 'is declined: expired', {
		tokens: ['chargeDeclinedExpiredCard'],
		decline: declines.expired
	}),
	card('4000000000000127', 'is declined: wrong security code', {
		tokens: ['chargeDeclinedIncorrectCvc'],
		decline: declines.cvc
	}),
	card('4000000000000119', 'is declined: processing error', {
		tokens: ['chargeDeclinedProcessingError'],
		decline: declines.processing
	}),
	card('4000000000000341', 'pays this once; charges of the kept card are declined', {
		tokens: ['chargeCustomerFail'],
		decline: declines.generic,
		refusedWhenAttached: false,
		failsOnceKept: true
	}),
	card('4000002500003155', 'asks for a confirmation, then pays, also later without the customer', {
		tokens: ['authenticationRequired'],
		confirmation: 'until set up'
	}),
	card('4000002760003184', 'asks for a confirmation at every payment', {
		tokens: ['authenticationRequiredOnSetup', 'threeDSecure2Required'],
		confirmation: 'always'
	}),
	card('4000003800000446', 'asks for a confirmation only while the customer pays', {
		tokens: ['authenticationRequiredSetupForOffSession'],
		confirmation: 'on session'
	}),
	card('4000008260003178', 'asks for a confirmation, then is declined: insufficient funds', {
		tokens: ['authenticationRequiredChargeDeclinedInsufficientFunds'],
		confirmation: 'always',
		decline: declines.funds
	}),
	card('4000008400001629', 'asks for a confirmation, then is declined', {
		tokens: ['threeDSecureRequiredChargeDeclined'],
		confirmation: 'always',
		decline: declines.generic
	}),
	card('4000000000000259', 'pays, then the charge is disputed', {
		tokens: ['createDispute'],
		disputed: true
	})
];

export const cardNumbered = (number: string): Card | undefined =>
	cards.find((known) => known.number === number);

/** @param token like `pm_card_visa` or `tok_visa` */
export const cardForToken = (token: string): Card | undefined =>
	cards.find(({ tokens }) => tokens.some((name) => token === `pm_card_${name}` || token === `tok_${name}`));

export type Situation = { onSession: boolean; setUp: boolean; confirmed: boolean; kept: boolean };

/** What comes of charging a card. */
export function chargeCard(
	{ confirmation, decline, failsOnceKept }: Card,
	{ onSession, setUp, confirmed, kept }: Situation
): { result: 'paid' } | { result: 'confirm' } | { result: 'declined'; decline: Decline } {
	const asks =
		confirmation === 'always' ||
		(confirmation === 'until set up' && !setUp) ||
		(confirmation === 'on session' && onSession);
	if (asks && !confirmed) return { result: 'confirm' };
	if (decline !== null && (!failsOnceKept || kept)) return { result: 'declined', decline };
	return { result: 'paid' };
}
