import type { Routes } from '../core/call';
import { checkoutSessions } from './checkout-sessions';
import { customers } from './customers';
import { events } from './events';
import { invoices } from './invoices';
import { paymentMethods } from './payment-methods';
import { payments } from './payments';
import { portalSessions } from './portal-sessions';
import { prices } from './prices';
import { products } from './products';
import { refunds } from './refunds';
import { subscriptions } from './subscriptions';

export const routes: Routes = {
	...products,
	...prices,
	...customers,
	...paymentMethods,
	...checkoutSessions,
	...subscriptions,
	...invoices,
	...payments,
	...refunds,
	...portalSessions,
	...events
};
