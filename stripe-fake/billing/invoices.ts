import { newId, randomText } from '../core/ids';
import { wholeList } from '../core/lists';
import type {
	Customer,
	Invoice,
	InvoiceItem,
	InvoiceLine,
	InvoicePayment,
	PaymentIntent,
	Subscription
} from '../core/wire';
import type { World } from '../core/world';
import { newIntent } from './collect';
import { lineOfItem, type Period } from './lines';

export type Draft = {
	customer: Customer;
	subscription: Subscription | null;
	lines: InvoiceLine[];
	reason: NonNullable<Invoice['billing_reason']>;
	period: Period;
	/** When it is finalised by itself; null where whoever makes it does so at once. */
	finalizesAt: number | null;
};

/** An invoice that nobody has been told of: also how a preview looks. */
export function composeInvoice(world: World, id: string, draft: Draft): Invoice {
	const { customer, subscription } = draft;
	const subtotal = draft.lines.reduce((sum, { amount }) => sum + amount, 0);
	const currency = subscription?.currency ?? draft.lines[0]?.currency ?? customer.currency ?? 'eur';
	// A customer's credit is a negative balance; what they owe from before is a positive one.
	const due = Math.max(0, subtotal + customer.balance);
	return {
		id,
		object: 'invoice',
		account_country: 'GB',
		account_name: 'Local stand-in for payments',
		account_tax_ids: null,
		amount_due: due,
		amount_overpaid: 0,
		amount_paid: 0,
		amount_paid_off_stripe: 0,
		amount_remaining: due,
		amount_shipping: 0,
		application: null,
		attempt_count: 0,
		attempted: false,
		auto_advance: draft.finalizesAt !== null,
		automatic_tax: { disabled_reason: null, enabled: false, liability: null, provider: null, status: null },
		automatically_finalizes_at: draft.finalizesAt,
		billing_reason: draft.reason,
		collection_method: 'charge_automatically',
		created: world.now(customer.id),
		currency,
		custom_fields: null,
		customer: customer.id,
		customer_account: null,
		customer_address: customer.address ?? null,
		customer_email: customer.email,
		customer_name: customer.name ?? null,
		customer_phone: customer.phone ?? null,
		customer_shipping: null,
		customer_tax_exempt: customer.tax_exempt ?? 'none',
		customer_tax_ids: [],
		default_payment_method: null,
		default_source: null,
		default_tax_rates: [],
		description: null,
		discounts: [],
		due_date: null,
		effective_at: null,
		ending_balance: null,
		footer: customer.invoice_settings.footer,
		from_invoice: null,
		hosted_invoice_url: null,
		invoice_pdf: null,
		issuer: { type: 'self' },
		last_finalization_error: null,
		latest_revision: null,
		lines: wholeList(
			draft.lines.map((line) => ({ ...line, invoice: id })),
			`/v1/invoices/${id}/lines`
		),
		livemode: false,
		metadata: {},
		next_payment_attempt: null,
		number: null,
		on_behalf_of: null,
		parent:
			subscription === null
				? null
				: {
						type: 'subscription_details',
						quote_details: null,
						subscription_details: {
							metadata: { ...subscription.metadata },
							subscription: subscription.id
						}
					},
		payment_settings: { default_mandate: null, payment_method_options: null, payment_method_types: null },
		period_end: draft.period.end,
		period_start: draft.period.start,
		post_payment_credit_notes_amount: 0,
		pre_payment_credit_notes_amount: 0,
		receipt_number: null,
		rendering: null,
		shipping_cost: null,
		shipping_details: null,
		starting_balance: customer.balance,
		statement_descriptor: null,
		status: 'draft',
		status_transitions: {
			finalized_at: null,
			marked_uncollectible_at: null,
			paid_at: null,
			voided_at: null
		},
		subtotal,
		subtotal_excluding_tax: subtotal,
		test_clock: null,
		total: subtotal,
		total_discount_amounts: [],
		total_excluding_tax: subtotal,
		total_pretax_credit_amounts: [],
		total_taxes: [],
		webhooks_delivered_at: null
	};
}

/** Prorations of a subscription that no invoice has billed yet. */
export const pendingItems = (world: World, subscription: string): InvoiceItem[] =>
	Object.values(world.objects.invoiceItems).filter(
		({ invoice, parent }) => invoice === null && parent?.subscription_details?.subscription === subscription
	);

/** A draft with its lines, pending prorations included. */
export function draftInvoice(world: World, draft: Draft): Invoice {
	const pending = draft.subscription === null ? [] : pendingItems(world, draft.subscription.id);
	const invoice = composeInvoice(world, newId('in'), {
		...draft,
		lines: [...pending.map((item) => lineOfItem(world, item)), ...draft.lines]
	});
	for (const item of pending) item.invoice = invoice.id;
	world.objects.invoices[invoice.id] = invoice;
	if (draft.subscription !== null) draft.subscription.latest_invoice = invoice.id;
	draft.customer.currency ??= invoice.currency;
	world.emit('invoice.created', invoice);
	return invoice;
}

function newPayment(world: World, invoice: Invoice, intent: PaymentIntent): InvoicePayment {
	const payment: InvoicePayment = {
		id: newId('inpay'),
		object: 'invoice_payment',
		amount_paid: null,
		amount_requested: invoice.amount_due,
		created: world.now(invoice.customer),
		currency: invoice.currency,
		invoice: invoice.id,
		is_default: true,
		livemode: false,
		payment: { type: 'payment_intent', payment_intent: intent.id },
		status: 'open',
		status_transitions: { canceled_at: null, paid_at: null }
	};
	world.objects.invoicePayments[payment.id] = payment;
	return payment;
}

export const paymentOf = (world: World, invoice: Invoice): InvoicePayment | undefined =>
	Object.values(world.objects.invoicePayments).find((payment) => payment.invoice === invoice.id);

/** Gives a draft its number and pages, and uses up the customer's credit. From now on its lines stay as they are. */
export function finalize(world: World, invoice: Invoice): void {
	const customer = world.objects.customers[invoice.customer ?? ''];
	const sequence = customer?.next_invoice_sequence ?? 1;
	const secret = randomText(40);
	const page = `${world.state.base}/invoice/${secret}`;
	world.state.invoiceSecrets[secret] = invoice.id;
	invoice.number = `${customer?.invoice_prefix ?? 'NONE'}-${String(sequence).padStart(4, '0')}`;
	if (customer !== undefined) {
		customer.next_invoice_sequence = sequence + 1;
		invoice.starting_balance = customer.balance;
		invoice.amount_due = Math.max(0, invoice.total + customer.balance);
		invoice.amount_remaining = invoice.amount_due;
		customer.balance = Math.min(0, invoice.total + customer.balance);
		invoice.ending_balance = customer.balance;
	}
	const now = world.now(invoice.customer);
	invoice.status = 'open';
	invoice.auto_advance = true;
	invoice.automatically_finalizes_at = null;
	invoice.effective_at = now;
	invoice.hosted_invoice_url = page;
	invoice.invoice_pdf = `${page}/pdf`;
	invoice.status_transitions.finalized_at = now;
	world.emit('invoice.finalized', invoice);
	if (invoice.amount_due > 0) {
		const intent = newIntent(world, {
			amount: invoice.amount_due,
			currency: invoice.currency,
			customer: invoice.customer,
			description:
				invoice.billing_reason === 'subscription_create' ? 'Subscription creation' : 'Subscription update',
			setUp: invoice.billing_reason === 'subscription_create'
		});
		newPayment(world, invoice, intent);
	}
}

/** @param outOfBand the money came another way: then only `invoice.paid` is told */
export function markPaid(world: World, invoice: Invoice, outOfBand = false): void {
	const now = world.now(invoice.customer);
	const due = invoice.amount_due;
	invoice.status = 'paid';
	invoice.amount_paid = due;
	invoice.amount_paid_off_stripe = outOfBand ? due : 0;
	invoice.amount_remaining = 0;
	invoice.attempted = true;
	invoice.auto_advance = false;
	invoice.next_payment_attempt = null;
	invoice.status_transitions.paid_at = now;
	const payment = paymentOf(world, invoice);
	if (payment !== undefined) {
		payment.status = outOfBand ? 'canceled' : 'paid';
		if (outOfBand) payment.status_transitions.canceled_at = now;
		else {
			payment.amount_paid = due;
			payment.status_transitions.paid_at = now;
			world.emit('invoice_payment.paid', payment);
		}
	}
	world.emit('invoice.paid', invoice);
	if (!outOfBand) world.emit('invoice.payment_succeeded', invoice);
}

export function voidInvoice(world: World, invoice: Invoice): void {
	const now = world.now(invoice.customer);
	invoice.status = 'void';
	invoice.auto_advance = false;
	invoice.next_payment_attempt = null;
	invoice.status_transitions.voided_at = now;
	const payment = paymentOf(world, invoice);
	const intent = world.objects.paymentIntents[payment?.payment.payment_intent ?? ''];
	if (payment !== undefined) {
		payment.status = 'canceled';
		payment.status_transitions.canceled_at = now;
	}
	if (intent !== undefined && intent.status !== 'succeeded') {
		intent.status = 'canceled';
		intent.canceled_at = now;
		intent.cancellation_reason = 'void_invoice';
		world.emit('payment_intent.canceled', intent);
	}
	world.emit('invoice.voided', invoice);
}
