import type { CheckoutSession, Invoice, Subscription } from '../core/wire';
import type { World } from '../core/world';
import { expireSession } from '../resources/checkout-sessions';
import { cancelNow } from './cancel';
import { draftInvoice, finalize, voidInvoice } from './invoices';
import { fullLines } from './change';
import { giveUp, payInvoice } from './pay';
import { periodFrom } from './subscribe';

const hour = 3600;
const renewed = ['active', 'past_due', 'unpaid', 'trialing'];

type Due = { at: number; work: () => void };

/** Moves the periods on, whether paid or not, and drafts the invoice that is collected an hour later. */
function renew(world: World, subscription: Subscription): void {
	const customer = world.objects.customers[subscription.customer];
	const [first] = subscription.items.data;
	if (customer === undefined || first === undefined) return;
	const past = { start: first.current_period_start, end: first.current_period_end };
	const next = periodFrom(past.end, first.price, subscription.billing_cycle_anchor);
	world.change('customer.subscription.updated', subscription, () => {
		for (const item of subscription.items.data) {
			item.current_period_start = next.start;
			item.current_period_end = next.end;
		}
	});
	draftInvoice(world, {
		customer,
		subscription,
		lines: fullLines(world, subscription, subscription.items.data),
		reason: 'subscription_cycle',
		period: past,
		// Nobody tries to collect any more where the subscription counts as unpaid.
		finalizesAt: subscription.status === 'unpaid' ? null : next.start + hour
	});
}

function dueOfSubscription(world: World, subscription: Subscription): Due | undefined {
	if (subscription.status === 'incomplete')
		return {
			at: subscription.created + 23 * hour,
			work: () => {
				world.change('customer.subscription.updated', subscription, () => {
					subscription.status = 'incomplete_expired';
					subscription.ended_at = world.now(subscription.customer);
				});
				const invoice = world.objects.invoices[subscription.latest_invoice ?? ''];
				if (invoice?.status === 'open') voidInvoice(world, invoice);
			}
		};
	const end = subscription.items.data[0]?.current_period_end;
	if (end === undefined || !renewed.includes(subscription.status)) return undefined;
	return {
		at: end,
		work: () => {
			if (subscription.cancel_at_period_end) cancelNow(world, subscription, 'cancellation_requested');
			else renew(world, subscription);
		}
	};
}

function dueOfInvoice(world: World, invoice: Invoice): Due | undefined {
	if (invoice.status === 'draft' && invoice.automatically_finalizes_at !== null)
		return {
			at: invoice.automatically_finalizes_at,
			work: () => {
				finalize(world, invoice);
				payInvoice(world, invoice, { onSession: false });
			}
		};
	if (invoice.status !== 'open') return undefined;
	if (invoice.next_payment_attempt !== null)
		return {
			at: invoice.next_payment_attempt,
			work: () => void payInvoice(world, invoice, { onSession: false })
		};
	const end = world.state.dunningEnds[invoice.id];
	return end === undefined ? undefined : { at: end, work: () => giveUp(world, invoice) };
}

function dueOfSession(world: World, session: CheckoutSession): Due | undefined {
	if (session.status !== 'open') return undefined;
	return { at: session.expires_at, work: () => expireSession(world, session) };
}

function earliest(world: World, customer: string | undefined): Due | undefined {
	let first: Due | undefined;
	const consider = (owner: string | null, due: Due | undefined) => {
		if (due === undefined || (customer !== undefined && owner !== customer)) return;
		if (due.at <= world.now(owner) && (first === undefined || due.at < first.at)) first = due;
	};
	for (const subscription of Object.values(world.objects.subscriptions))
		consider(subscription.customer, dueOfSubscription(world, subscription));
	for (const invoice of Object.values(world.objects.invoices))
		consider(invoice.customer, dueOfInvoice(world, invoice));
	for (const session of Object.values(world.objects.checkoutSessions))
		consider(session.customer, dueOfSession(world, session));
	return first;
}

/** Does, in the order in which it fell due, whatever time has brought. @returns how many things were done */
export function runDue(world: World, customer?: string): number {
	let done = 0;
	for (let due = earliest(world, customer); due !== undefined; due = earliest(world, customer)) {
		const { at, work } = due;
		world.at(at, work);
		done += 1;
		if (done > 10_000) throw new Error('Too much is due: was the clock moved by centuries?');
	}
	return done;
}
