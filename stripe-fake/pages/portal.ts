import { applyChange, planChange } from '../billing/change';
import { newPaymentMethod } from '../billing/cards-on-file';
import { asDay, asMoney } from '../billing/money';
import { decodeForm, type FormTree } from '../core/form';
import type { Customer, PortalSession, Subscription } from '../core/wire';
import type { World } from '../core/world';
import { redirect, type HttpAnswer, type HttpRequest } from '../http/answer';
import { setEnd } from '../resources/subscriptions';
import { cardFields, cardTable, readCard, typedIn, type Typed } from './card-form';
import { escapeHtml, fault, link, notFound, page } from './layout';

type Place = { world: World; session: PortalSession; customer: Customer; path: string };

const emptyForm: Typed = { card: '', expiry: '', cvc: '', name: '', email: '' };

const running = ({ world, customer }: Place): Subscription[] =>
	Object.values(world.objects.subscriptions).filter(
		(subscription) => subscription.customer === customer.id && subscription.ended_at === null
	);

function subscriptionPart({ world, path }: Place, subscription: Subscription): string {
	const [item] = subscription.items.data;
	if (item === undefined) return '';
	const name = world.objects.products[item.price.product]?.name ?? item.price.product;
	const end = asDay(item.current_period_end);
	const hidden = `<input type="hidden" name="subscription" value="${subscription.id}">`;
	return `<h2>${escapeHtml(name)}</h2>
<p>${item.quantity ?? 1} × ${asMoney(item.price.unit_amount ?? 0, item.price.currency)} a ${item.price.recurring?.interval ?? 'month'}; ${escapeHtml(subscription.status)}.
${subscription.cancel_at_period_end ? `Ends on ${end}.` : `Next invoice on ${end}.`}</p>
<form method="post" action="${path}/quantity">${hidden}
<label>Number of seats<input name="quantity" inputmode="numeric" value="${item.quantity ?? 1}"></label>
<button>Change the number</button></form>
<form method="post" action="${path}/${subscription.cancel_at_period_end ? 'keep' : 'cancel'}">${hidden}
<button>${subscription.cancel_at_period_end ? 'Keep the subscription' : `End it on ${end}`}</button></form>`;
}

function cardPart({ world, customer, path }: Place, subscriptions: Subscription[], typed: Typed): string {
	const id = subscriptions[0]?.default_payment_method ?? customer.invoice_settings.default_payment_method;
	const card = world.objects.paymentMethods[id ?? '']?.card;
	return `<h2>Card</h2>
<p>${card === undefined ? 'No card is kept.' : `The card that pays ends in ${card.last4}.`}</p>
<form method="post" action="${path}/card">
${cardFields(typed, false)}
<button>Pay with this card from now on</button>
</form>`;
}

function invoicePart({ world, customer }: Place): string {
	const invoices = Object.values(world.objects.invoices)
		.filter((invoice) => invoice.customer === customer.id && invoice.number !== null)
		.reverse();
	if (invoices.length === 0) return '<h2>Invoices</h2><p>None yet.</p>';
	const rows = invoices.map(
		(invoice) =>
			`<tr><td>${link(invoice.hosted_invoice_url ?? null, invoice.number ?? '')}<br>${asDay(invoice.created)}</td><td>${escapeHtml(invoice.status ?? '')}</td><td class="amount">${asMoney(invoice.amount_due, invoice.currency)}</td></tr>`
	);
	return `<h2>Invoices</h2><table><tbody>${rows.join('\n')}</tbody></table>`;
}

function show(place: Place, typed = emptyForm, problem = '', status = 200): HttpAnswer {
	const { session, customer } = place;
	const subscriptions = running(place);
	return page(
		status,
		'Your subscription',
		`<p>${escapeHtml([customer.name, customer.email].filter((part) => part != null).join(', '))}</p>
<p class="links">${link(session.return_url, 'Back to where you came from')}</p>
${fault(problem)}
${subscriptions.map((subscription) => subscriptionPart(place, subscription)).join('\n')}
${subscriptions.length === 0 ? '<p>There is no subscription.</p>' : ''}
${cardPart(place, subscriptions, typed)}
${invoicePart(place)}
${cardTable()}`
	);
}

function changeQuantity(place: Place, subscription: Subscription, form: FormTree): HttpAnswer {
	const { world, path } = place;
	const quantity = Number(form.quantity);
	const [item] = subscription.items.data;
	if (!Number.isInteger(quantity) || quantity < 1 || quantity > 999_999 || item === undefined)
		return show(place, emptyForm, 'Type a whole number of seats, 1 or more.', 400);
	const change = {
		items: [{ id: item.id, price: undefined, quantity, deleted: false, metadata: undefined }],
		proration: 'create_prorations' as const,
		at: world.now(subscription.customer),
		anchorNow: false
	};
	applyChange(world, subscription, change, planChange(world, subscription, change), () => undefined);
	return redirect(path);
}

function changeCard(place: Place, form: FormTree): HttpAnswer {
	const { world, customer, path } = place;
	const typed = typedIn(form);
	const read = readCard(typed, world.now(customer.id));
	if ('fault' in read) return show(place, typed, read.fault, 400);
	if (read.card.refusedWhenAttached && read.card.decline !== null)
		return show(
			place,
			{ ...typed, card: '', cvc: '' },
			`${read.card.decline.message} The card was not kept.`,
			402
		);
	const card = newPaymentMethod(world, read.card, { ...read.entry, email: customer.email });
	card.customer = customer.id;
	const kept = world.state.cards[card.id];
	if (kept !== undefined) kept.setUp = true;
	world.emit('payment_method.attached', card);
	world.change('customer.updated', customer, () => {
		customer.invoice_settings.default_payment_method = card.id;
	});
	for (const subscription of running(place))
		world.change('customer.subscription.updated', subscription, () => {
			subscription.default_payment_method = card.id;
		});
	return redirect(path);
}

function act(place: Place, action: string, form: FormTree): HttpAnswer {
	const { world, path } = place;
	if (action === 'card') return changeCard(place, form);
	const subscription = running(place).find(({ id }) => id === form.subscription);
	if (subscription === undefined) return show(place, emptyForm, 'This subscription has ended.', 409);
	if (action === 'quantity') return changeQuantity(place, subscription, form);
	if (action !== 'cancel' && action !== 'keep') return notFound();
	world.change('customer.subscription.updated', subscription, () =>
		setEnd(world, subscription, action === 'cancel')
	);
	return redirect(path);
}

/** `/portal/:secret` and what is posted below it. */
export function portalPage(world: World, request: HttpRequest): HttpAnswer {
	const [, secret = '', action = ''] = /^\/portal\/([^/]+)(?:\/(\w+))?$/.exec(request.path) ?? [];
	const id = Object.hasOwn(world.state.portalSecrets, secret) ? world.state.portalSecrets[secret] : undefined;
	const session = world.objects.portalSessions[id ?? ''];
	const customer = world.objects.customers[session?.customer ?? ''];
	if (session === undefined || customer === undefined) return notFound();
	const place = { world, session, customer, path: `/portal/${secret}` };
	if (request.method === 'POST') return act(place, action, decodeForm(request.body));
	return action === '' ? show(place) : redirect(place.path);
}
