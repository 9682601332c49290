import type Stripe from 'stripe';

/**
 * An object of the SDK's types as it travels: references are ids (never objects, until expanded), and decimals are
 * strings, which the SDK turns into Decimal objects.
 */
export type Wire<T> = T extends Stripe.Decimal
	? string
	: T extends string | number | boolean | null | undefined
		? T
		: T extends (infer Element)[]
			? Field<Element>[]
			: T extends object
				? { [Key in keyof T]: Field<T[Key]> }
				: T;

type Field<T> = [Extract<T, string>] extends [never]
	? Wire<T>
	: [Extract<T, { object: string }>] extends [never]
		? Wire<T>
		: Extract<T, string | null | undefined>;

export type Product = Wire<Stripe.Product>;
export type Price = Wire<Stripe.Price>;
export type Customer = Wire<Stripe.Customer>;
export type DeletedCustomer = Wire<Stripe.DeletedCustomer>;
export type PaymentMethod = Wire<Stripe.PaymentMethod>;
export type PaymentIntent = Wire<Stripe.PaymentIntent>;
export type Charge = Wire<Stripe.Charge>;
export type Refund = Wire<Stripe.Refund>;
export type Subscription = Wire<Stripe.Subscription>;
export type SubscriptionItem = Wire<Stripe.SubscriptionItem>;
export type Plan = Wire<Stripe.Plan>;
export type Invoice = Wire<Stripe.Invoice>;
export type InvoiceLine = Wire<Stripe.InvoiceLineItem>;
export type InvoiceItem = Wire<Stripe.InvoiceItem>;
export type InvoicePayment = Wire<Stripe.InvoicePayment>;
export type CheckoutSession = Wire<Stripe.Checkout.Session>;
export type CheckoutLine = Wire<Stripe.LineItem>;
export type PortalSession = Wire<Stripe.BillingPortal.Session>;

export type EventType = Stripe.Event['type'];

/** Whatever an event may tell of. */
export type EventSubject =
	| Product
	| Price
	| Customer
	| DeletedCustomer
	| PaymentMethod
	| PaymentIntent
	| Charge
	| Refund
	| Subscription
	| Invoice
	| InvoiceItem
	| InvoicePayment
	| CheckoutSession
	| PortalSession;

export type Event = Omit<Stripe.Event, 'type' | 'data'> & {
	type: EventType;
	data: { object: EventSubject; previous_attributes?: { [name: string]: unknown } };
};

/** A page of a list, as the API answers it. */
export type List<T> = { object: 'list'; data: T[]; has_more: boolean; url: string };
