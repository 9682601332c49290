import type {
	Charge,
	CheckoutLine,
	CheckoutSession,
	Customer,
	DeletedCustomer,
	Event,
	Invoice,
	InvoiceItem,
	InvoicePayment,
	PaymentIntent,
	PaymentMethod,
	PortalSession,
	Price,
	Product,
	Refund,
	Subscription
} from './wire';

export type ById<T> = { [id: string]: T };

export type Kinds = {
	products: Product;
	prices: Price;
	customers: Customer;
	deletedCustomers: DeletedCustomer;
	paymentMethods: PaymentMethod;
	paymentIntents: PaymentIntent;
	charges: Charge;
	refunds: Refund;
	subscriptions: Subscription;
	invoices: Invoice;
	invoiceItems: InvoiceItem;
	invoicePayments: InvoicePayment;
	checkoutSessions: CheckoutSession;
	portalSessions: PortalSession;
	events: Event;
};

/** Objects of the API, by id, in the order in which they were made. */
export type Objects = { [Kind in keyof Kinds]: ById<Kinds[Kind]> };

/** What a Checkout Session is to make once it is paid; the API never shows it. */
export type CheckoutPlan = {
	lines: CheckoutLine[];
	subscriptionMetadata: Record<string, string>;
	intentMetadata: Record<string, string>;
	description: string | null;
	/** Card that waits for the customer's confirmation. */
	pendingPaymentMethod: string | null;
};

/** One event on its way to the webhook. */
export type Delivery = {
	id: string;
	event: string;
	type: string;
	state: 'queued' | 'held' | 'waiting' | 'delivered' | 'given up' | 'dropped';
	/** Milliseconds since 1970. */
	nextAt: number;
	attempts: { at: number; status: number | null; error: string | null; milliseconds: number }[];
};

/** First answer to a request with an idempotency key. */
export type KeptAnswer = {
	method: string;
	path: string;
	form: string;
	status: number;
	body: string;
	requestId: string;
	at: number;
};

export type State = {
	/** Address that links in objects begin with. */
	base: string;
	objects: Objects;
	cards: ById<{ number: string; setUp: boolean }>;
	checkoutPlans: ById<CheckoutPlan>;
	/** Unix seconds at which the account gives up an invoice that it does not try to collect again. */
	dunningEnds: ById<number>;
	/** Portal session by the secret in its address. */
	portalSecrets: ById<string>;
	/** Invoice by the secret in its address. */
	invoiceSecrets: ById<string>;
	deliveries: ById<Delivery>;
	keptAnswers: ById<KeptAnswer>;
	/** Seconds that clocks are ahead of the real one: everybody's, and a customer's beyond it. */
	clock: { all: number; customers: ById<number> };
};

export function emptyState(base: string): State {
	return {
		base,
		objects: {
			products: {},
			prices: {},
			customers: {},
			deletedCustomers: {},
			paymentMethods: {},
			paymentIntents: {},
			charges: {},
			refunds: {},
			subscriptions: {},
			invoices: {},
			invoiceItems: {},
			invoicePayments: {},
			checkoutSessions: {},
			portalSessions: {},
			events: {}
		},
		cards: {},
		checkoutPlans: {},
		dunningEnds: {},
		portalSecrets: {},
		invoiceSecrets: {},
		deliveries: {},
		keptAnswers: {},
		clock: { all: 0, customers: {} }
	};
}
