import { awaitsConfirmation, confirmCheckout, payCheckout, type CheckoutResult } from '../billing/checkout';
import { asMoney } from '../billing/money';
import { decodeForm } from '../core/form';
import type { CheckoutSession } from '../core/wire';
import type { World } from '../core/world';
import { redirect, type HttpAnswer, type HttpRequest } from '../http/answer';
import { cardFields, cardTable, readCard, typedIn, type Typed } from './card-form';
import { escapeHtml, fault, link, notFound, page } from './layout';

const nothingTyped: Typed = { card: '', expiry: '', cvc: '', name: '', email: '' };

const successAddress = ({ id, success_url }: CheckoutSession): string =>
	(success_url ?? '').replaceAll(/\{CHECKOUT_SESSION_ID\}|%7BCHECKOUT_SESSION_ID%7D/gi, id);

function order(world: World, session: CheckoutSession): string {
	const currency = session.currency ?? 'eur';
	const rows = (world.state.checkoutPlans[session.id]?.lines ?? []).map(
		({ description, quantity, price, amount_total }) => {
			const per = price?.recurring == null ? '' : ` a ${price.recurring.interval}`;
			const each = `${asMoney(price?.unit_amount ?? 0, currency)}${per}`;
			return `<tr><td>${escapeHtml(description ?? '')}<br>${quantity ?? 1} × ${each}</td><td class="amount">${asMoney(amount_total, currency)}</td></tr>`;
		}
	);
	return `<table><tbody>${rows.join('\n')}
<tr><th>To pay now</th><th class="amount">${asMoney(session.amount_total ?? 0, currency)}</th></tr></tbody></table>`;
}

function form(
	world: World,
	session: CheckoutSession,
	typed: Typed,
	problem: string,
	status = 200
): HttpAnswer {
	const asksEmail = session.customer === null && session.customer_email === null;
	return page(
		status,
		session.mode === 'subscription' ? 'Pay for a subscription' : 'Pay',
		`${order(world, session)}
${fault(problem)}
<form method="post" action="/checkout/${session.id}">
${cardFields(typed, asksEmail)}
<button>Pay ${asMoney(session.amount_total ?? 0, session.currency ?? 'eur')}</button>
</form>
<p class="links">${link(session.cancel_url, 'Back without paying')}</p>
${cardTable()}`
	);
}

const question = (world: World, session: CheckoutSession): HttpAnswer =>
	page(
		200,
		'Confirm the payment',
		`<p>The issuer of your card asks whether it is you who pays.</p>
${order(world, session)}
<form method="post" action="/checkout/${session.id}/confirm">
<button name="answer" value="yes">Confirm the payment</button>
<button name="answer" value="no">Refuse it</button>
</form>`
	);

function after(world: World, session: CheckoutSession, outcome: CheckoutResult, typed: Typed): HttpAnswer {
	if (outcome.result === 'paid') return redirect(successAddress(session));
	if (outcome.result === 'confirm') return redirect(`/checkout/${session.id}/confirm`);
	return form(
		world,
		session,
		{ ...typed, card: '', cvc: '' },
		`${outcome.decline.message} Nothing was paid. You can try another card.`,
		402
	);
}

function closed(session: CheckoutSession): HttpAnswer {
	const done = session.status === 'complete';
	return page(
		done ? 200 : 410,
		done ? 'This was paid' : 'This page has expired',
		done
			? `<p class="links">${link(successAddress(session), 'Go on')}</p>`
			: `<p>Begin the payment once more where you came from.</p><p class="links">${link(session.cancel_url, 'Back')}</p>`
	);
}

/** `/checkout/:id` and `/checkout/:id/confirm`. */
export function checkoutPage(world: World, request: HttpRequest): HttpAnswer {
	const [, id = '', step = ''] = /^\/checkout\/([^/]+)(\/confirm)?$/.exec(request.path) ?? [];
	const session = Object.hasOwn(world.objects.checkoutSessions, id)
		? world.objects.checkoutSessions[id]
		: undefined;
	if (session === undefined) return notFound();
	if (session.status !== 'open') return closed(session);
	if (step !== '' && !awaitsConfirmation(world, session)) return redirect(`/checkout/${id}`);
	if (request.method !== 'POST')
		return step === '' ? form(world, session, nothingTyped, '') : question(world, session);
	const given = decodeForm(request.body);
	if (step !== '')
		return after(world, session, confirmCheckout(world, session, given.answer === 'yes'), nothingTyped);
	const typed = typedIn(given);
	const email = typed.email === '' ? (session.customer_email ?? '') : typed.email;
	const read = readCard({ ...typed, email }, world.now(session.customer));
	if ('fault' in read) return form(world, session, typed, read.fault, 400);
	return after(world, session, payCheckout(world, session, read.card, read.entry), typed);
}
