import { attach, declined } from '../billing/cards-on-file';
import { fullLines, planChange } from '../billing/change';
import { composeInvoice, finalize, pendingItems, voidInvoice } from '../billing/invoices';
import { lineOfItem } from '../billing/lines';
import { payInvoice, payOutOfBand } from '../billing/pay';
import { periodFrom } from '../billing/subscribe';
import type { Call, Routes } from '../core/call';
import { ApiError, cardError, invalidRequest } from '../core/errors';
import { find } from '../core/find';
import { newId } from '../core/ids';
import { isWithin, newestFirst, pageOf, readPaging, readRange } from '../core/lists';
import { mergeMetadata } from '../core/params';
import type { Invoice, InvoiceLine, InvoicePayment, List, Subscription } from '../core/wire';
import type { World } from '../core/world';
import { readItemChanges } from './subscriptions';

function list({ world, params }: Call): List<Invoice> {
	const customer = params.string('customer');
	const subscription = params.string('subscription');
	const status = params.oneOf('status', ['draft', 'open', 'paid', 'uncollectible', 'void']);
	const created = readRange(params, 'created');
	params.oneOf('collection_method', ['charge_automatically']);
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.invoices).filter(
		(invoice) =>
			(customer === undefined || invoice.customer === customer) &&
			(subscription === undefined || invoice.parent?.subscription_details?.subscription === subscription) &&
			(status === undefined || invoice.status === status) &&
			isWithin(invoice.created, created)
	);
	return pageOf(found, paging, '/v1/invoices', 'invoice');
}

function retrieve({ world, params, ids: [id = ''] }: Call): Invoice {
	params.done();
	return find(world, 'invoices', id);
}

function update({ world, params, ids: [id = ''] }: Call): Invoice {
	const invoice = find(world, 'invoices', id);
	const metadata = params.metadata();
	const description = params.text('description');
	params.done();
	world.change('invoice.updated', invoice, () => {
		invoice.metadata = mergeMetadata(invoice.metadata, metadata);
		if (description !== undefined) invoice.description = description;
	});
	return invoice;
}

function listLines({ world, params, ids: [id = ''] }: Call): List<InvoiceLine> {
	const invoice = find(world, 'invoices', id);
	const paging = readPaging(params);
	params.done();
	return pageOf(invoice.lines.data, paging, `/v1/invoices/${id}/lines`, 'line_item');
}

const isNot = (invoice: Invoice, wanted: string) =>
	invalidRequest(`This invoice is ${invoice.status}: only ${wanted} can be.`, {
		code: 'invoice_not_editable'
	});

function finalizeNow({ world, params, ids: [id = ''] }: Call): Invoice {
	const invoice = find(world, 'invoices', id);
	const advance = params.boolean('auto_advance');
	params.done();
	if (invoice.status !== 'draft') throw isNot(invoice, 'a draft');
	finalize(world, invoice);
	invoice.auto_advance = advance ?? invoice.auto_advance;
	return invoice;
}

function pay({ world, params, ids: [id = ''] }: Call): Invoice {
	const invoice = find(world, 'invoices', id);
	const given = {
		paymentMethod: params.string('payment_method'),
		outOfBand: params.boolean('paid_out_of_band') ?? false,
		offSession: params.boolean('off_session') ?? true
	};
	params.done();
	if (invoice.status === 'paid')
		throw invalidRequest('Invoice is already paid', { code: 'invoice_already_paid' });
	if (invoice.status === 'draft') finalize(world, invoice);
	if (invoice.status !== 'open') throw isNot(invoice, 'an open one');
	if (given.outOfBand) {
		payOutOfBand(world, invoice);
		return invoice;
	}
	const chosen =
		given.paymentMethod === undefined
			? undefined
			: attach(world, given.paymentMethod, invoice.customer ?? '', 'payment_method');
	const payment = payInvoice(world, invoice, { onSession: !given.offSession }, chosen);
	if (payment.result === 'declined') throw declined(payment.decline, payment.paymentMethod);
	if (payment.result === 'confirm')
		throw cardError({
			code: 'invoice_payment_intent_requires_action',
			message: 'This payment requires additional user action before it can be completed successfully.'
		});
	if (payment.result === 'no card')
		throw invalidRequest('There is no default_payment_method set on this Customer or Invoice.', {
			code: 'resource_missing'
		});
	return invoice;
}

function voidNow({ world, params, ids: [id = ''] }: Call): Invoice {
	const invoice = find(world, 'invoices', id);
	params.done();
	if (invoice.status !== 'open' && invoice.status !== 'uncollectible') throw isNot(invoice, 'an open one');
	voidInvoice(world, invoice);
	return invoice;
}

function nothingUpcoming(customer: string): ApiError {
	return new ApiError(404, {
		type: 'invalid_request_error',
		code: 'invoice_upcoming_none',
		message: `No upcoming invoices for customer: ${customer}`
	});
}

function findSubscription(world: World, id: string | undefined, customer: string | undefined): Subscription {
	if (id !== undefined) return find(world, 'subscriptions', id, 'subscription');
	const running = Object.values(world.objects.subscriptions).filter(
		(subscription) => subscription.customer === customer && subscription.ended_at === null
	);
	const [only] = running;
	if (only === undefined || running.length > 1) throw nothingUpcoming(customer ?? '');
	return only;
}

/** The invoice that a change would make now, or the next one with it; nothing is kept. */
function preview({ world, params }: Call): Invoice {
	const customerId = params.string('customer');
	const subscriptionId = params.string('subscription');
	const details = params.child('subscription_details');
	const items = details === undefined ? undefined : readItemChanges(details);
	const proration =
		details?.oneOf('proration_behavior', ['create_prorations', 'always_invoice', 'none']) ??
		'create_prorations';
	const at = details?.integer('proration_date');
	const anchor = details?.child('billing_cycle_anchor')?.oneOf('type', ['now', 'unchanged']);
	const cancels = details?.boolean('cancel_at_period_end');
	const recurring = params.oneOf('preview_mode', ['next', 'recurring']) === 'recurring';
	if (customerId === undefined && subscriptionId === undefined) throw params.missing('customer');
	params.done();
	if (customerId !== undefined) find(world, 'customers', customerId, 'customer');
	const subscription = findSubscription(world, subscriptionId, customerId);
	const customer = find(world, 'customers', subscription.customer, 'customer');
	if (subscription.ended_at !== null) throw nothingUpcoming(customer.id);
	const change = {
		items: items?.resolve(world, subscription) ?? [],
		proration,
		at: at ?? world.now(customer.id),
		anchorNow: anchor === 'now'
	};
	const plan = planChange(world, subscription, change);
	const pending = [...pendingItems(world, subscription.id), ...plan.prorations].map((item) =>
		lineOfItem(world, item)
	);
	const now = plan.restarted || (proration === 'always_invoice' && plan.prorations.length > 0);
	const [first] = plan.items;
	if (first === undefined) throw nothingUpcoming(customer.id);
	const next = periodFrom(first.current_period_end, first.price, subscription.billing_cycle_anchor);
	if (!now && (cancels ?? subscription.cancel_at_period_end) && pending.length === 0)
		throw nothingUpcoming(customer.id);
	const coming = plan.restarted
		? plan.items
		: plan.items.map((item) => ({
				...item,
				current_period_start: next.start,
				current_period_end: next.end
			}));
	const full = fullLines(world, subscription, coming);
	const lines = recurring ? full : [...pending, ...(now && !plan.restarted ? [] : full)];
	const invoice = composeInvoice(world, newId('upcoming_in'), {
		customer,
		subscription,
		lines,
		reason: now ? 'subscription_update' : 'upcoming',
		period: now
			? { start: change.at, end: change.at }
			: { start: first.current_period_start, end: first.current_period_end },
		finalizesAt: now ? null : next.start + 3600
	});
	invoice.created = now ? change.at : next.start;
	invoice.next_payment_attempt = now ? change.at : next.start + 3600;
	const parent = invoice.parent?.subscription_details;
	if (parent != null && plan.prorations.length > 0) parent.subscription_proration_date = change.at;
	return invoice;
}

function listPayments({ world, params }: Call): List<InvoicePayment> {
	const invoice = params.string('invoice');
	const status = params.oneOf('status', ['canceled', 'open', 'paid']);
	const payment = params.child('payment');
	payment?.oneOf('type', ['payment_intent']);
	const intent = payment?.string('payment_intent');
	const created = readRange(params, 'created');
	const paging = readPaging(params);
	params.done();
	const found = newestFirst(world.objects.invoicePayments).filter(
		(made) =>
			(invoice === undefined || made.invoice === invoice) &&
			(status === undefined || made.status === status) &&
			(intent === undefined || made.payment.payment_intent === intent) &&
			isWithin(made.created, created)
	);
	return pageOf(found, paging, '/v1/invoice_payments', 'invoice_payment');
}

function retrievePayment({ world, params, ids: [id = ''] }: Call): InvoicePayment {
	params.done();
	return find(world, 'invoicePayments', id);
}

export const invoices: Routes = {
	'GET /v1/invoices': list,
	'POST /v1/invoices/create_preview': preview,
	'GET /v1/invoices/:id': retrieve,
	'POST /v1/invoices/:id': update,
	'GET /v1/invoices/:id/lines': listLines,
	'POST /v1/invoices/:id/finalize': finalizeNow,
	'POST /v1/invoices/:id/pay': pay,
	'POST /v1/invoices/:id/void': voidNow,
	'GET /v1/invoice_payments': listPayments,
	'GET /v1/invoice_payments/:id': retrievePayment
};
