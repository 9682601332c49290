import type { World } from '../core/world';
import type { HttpAnswer, HttpRequest } from '../http/answer';
import { cardTable } from './card-form';
import { checkoutPage } from './checkout';
import { invoicePage } from './invoice';
import { notFound, page } from './layout';
import { portalPage } from './portal';

/** Pages for people: what a payment service shows itself. */
export function answerPage(world: World, request: HttpRequest): HttpAnswer {
	if (request.method !== 'GET' && request.method !== 'POST') return notFound();
	if (request.path.startsWith('/checkout/')) return checkoutPage(world, request);
	if (request.path.startsWith('/portal/')) return portalPage(world, request);
	if (request.path.startsWith('/invoice/')) return invoicePage(world, request);
	if (request.path !== '/') return notFound();
	const { customers, subscriptions, invoices } = world.objects;
	const counted = [customers, subscriptions, invoices].map((kind) => Object.keys(kind).length);
	return page(
		200,
		'Payments that are none',
		`<p>It holds ${counted[0]} customers, ${counted[1]} subscriptions and ${counted[2]} invoices.</p>
${cardTable()}`
	);
}
