import { newPaymentMethod } from '../billing/cards-on-file';
import { asDay, asMoney } from '../billing/money';
import { payInvoice } from '../billing/pay';
import { decodeForm } from '../core/form';
import type { Invoice } from '../core/wire';
import type { World } from '../core/world';
import { redirect, type HttpAnswer, type HttpRequest } from '../http/answer';
import { cardFields, cardTable, readCard, typedIn, type Typed } from './card-form';
import { escapeHtml, fault, notFound, page } from './layout';
import { plainPdf } from './pdf';

const state = (invoice: Invoice): string => {
	const paid = invoice.status_transitions.paid_at;
	if (invoice.status === 'paid' && paid !== null) return `Paid on ${asDay(paid)}`;
	return invoice.status === 'open' ? 'Not paid yet' : `This invoice is ${invoice.status ?? 'a draft'}`;
};

const heading = (invoice: Invoice): string[] => [
	`Invoice ${invoice.number ?? ''}`,
	`For ${[invoice.customer_name, invoice.customer_email].filter((part) => part !== null).join(', ')}`,
	`Of ${asDay(invoice.created)}`,
	state(invoice)
];

const totals = (invoice: Invoice): [string, number][] => [
	['Total', invoice.total],
	...(invoice.starting_balance === 0
		? []
		: [['Balance before', invoice.starting_balance] as [string, number]]),
	['To pay', invoice.amount_due]
];

export function invoicePdf(invoice: Invoice): Uint8Array {
	const money = (amount: number) => asMoney(amount, invoice.currency);
	return plainPdf([
		...heading(invoice),
		'',
		...invoice.lines.data.map(({ description, amount }) => `${description ?? ''}: ${money(amount)}`),
		'',
		...totals(invoice).map(([name, amount]) => `${name}: ${money(amount)}`),
		'',
		'Made by a local stand-in for a payment service. No money was taken.'
	]);
}

const emptyForm: Typed = { card: '', expiry: '', cvc: '', name: '', email: '' };

function show(invoice: Invoice, path: string, typed: Typed, problem: string, status = 200): HttpAnswer {
	const money = (amount: number) => asMoney(amount, invoice.currency);
	const [title = '', ...rest] = heading(invoice);
	const row = (name: string, amount: number) =>
		`<tr><td>${escapeHtml(name)}</td><td class="amount">${money(amount)}</td></tr>`;
	const payable =
		invoice.status === 'open'
			? `<h2>Pay it with a card</h2>
<form method="post" action="${path}">
${cardFields(typed, false)}
<button>Pay ${money(invoice.amount_due)}</button>
</form>
${cardTable()}`
			: '';
	return page(
		status,
		title,
		`${rest.map((line) => `<p>${escapeHtml(line)}</p>`).join('\n')}
<table><tbody>
${invoice.lines.data.map(({ description, amount }) => row(description ?? '', amount)).join('\n')}
${totals(invoice)
	.map(([name, amount]) => row(name, amount))
	.join('\n')}
</tbody></table>
<p class="links"><a href="${path}/pdf">As a PDF</a></p>
${fault(problem)}
${payable}`
	);
}

/** Charges the typed card, keeps it, and lets it pay from now on. */
function pay(world: World, invoice: Invoice, path: string, body: string): HttpAnswer {
	const typed = typedIn(decodeForm(body));
	const read = readCard(typed, world.now(invoice.customer));
	if ('fault' in read) return show(invoice, path, typed, read.fault, 400);
	const card = newPaymentMethod(world, read.card, read.entry);
	// The page itself stands for the question of the card's issuer: who pays here has confirmed.
	const outcome = payInvoice(
		world,
		invoice,
		{ onSession: true, confirmed: true, typedIn: true, setUp: true },
		card
	);
	if (outcome.result !== 'paid') {
		const message =
			outcome.result === 'declined' ? outcome.decline.message : 'The payment was not confirmed.';
		return show(invoice, path, { ...typed, card: '', cvc: '' }, `${message} Nothing was paid.`, 402);
	}
	keepAndUse(world, invoice, card.id);
	return redirect(path);
}

function keepAndUse(world: World, invoice: Invoice, card: string): void {
	const customer = world.objects.customers[invoice.customer ?? ''];
	const paymentMethod = world.objects.paymentMethods[card];
	if (customer === undefined || paymentMethod === undefined) return;
	paymentMethod.customer = customer.id;
	world.emit('payment_method.attached', paymentMethod);
	const subscription = world.objects.subscriptions[invoice.parent?.subscription_details?.subscription ?? ''];
	if (subscription !== undefined && subscription.ended_at === null)
		world.change('customer.subscription.updated', subscription, () => {
			subscription.default_payment_method = card;
		});
}

/** `/invoice/:secret` and `/invoice/:secret/pdf`. */
export function invoicePage(world: World, request: HttpRequest): HttpAnswer {
	const [, secret = '', pdf = ''] = /^\/invoice\/([^/]+)(\/pdf)?$/.exec(request.path) ?? [];
	const id = Object.hasOwn(world.state.invoiceSecrets, secret)
		? world.state.invoiceSecrets[secret]
		: undefined;
	const invoice = world.objects.invoices[id ?? ''];
	if (invoice === undefined) return notFound();
	if (pdf !== '')
		return {
			status: 200,
			headers: {
				'content-type': 'application/pdf',
				'content-disposition': `inline; filename="invoice-${invoice.number ?? invoice.id}.pdf"`
			},
			body: invoicePdf(invoice)
		};
	const path = `/invoice/${secret}`;
	if (request.method === 'POST' && invoice.status === 'open') return pay(world, invoice, path, request.body);
	return show(invoice, path, emptyForm, '');
}
