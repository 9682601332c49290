import type { Subscription } from '../core/wire';
import type { World } from '../core/world';

type Reason = NonNullable<NonNullable<Subscription['cancellation_details']>['reason']>;

/** Ends a subscription. Its open invoices stay, but are no longer collected by themselves. */
export function cancelNow(world: World, subscription: Subscription, reason: Reason): void {
	const now = world.now(subscription.customer);
	subscription.status = 'canceled';
	subscription.canceled_at ??= now;
	subscription.ended_at = now;
	subscription.cancellation_details = {
		comment: subscription.cancellation_details?.comment ?? null,
		feedback: subscription.cancellation_details?.feedback ?? null,
		feedback_option: null,
		reason
	};
	for (const invoice of Object.values(world.objects.invoices)) {
		if (invoice.parent?.subscription_details?.subscription !== subscription.id) continue;
		if (invoice.status !== 'open' && invoice.status !== 'draft') continue;
		invoice.auto_advance = false;
		invoice.automatically_finalizes_at = null;
		invoice.next_payment_attempt = null;
	}
	world.emit('customer.subscription.deleted', subscription);
}
