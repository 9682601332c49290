import { planById, type Plan, type Plans } from './plans';

/* What a subscription, as last fetched, entitles to at an instant. Pure: the clock is an argument. */

/** The columns of a subscription that decide. */
export interface SubscriptionFacts {
	id: string;
	status: string;
	planId: string | null;
	quantity: number;
	startedAt: Date;
	periodEnd: Date;
	/** End of the last period that a paid invoice covers. */
	paidUntil: Date | null;
	cancelAtPeriodEnd: boolean;
}

export type Standing =
	/** Paid for, or to try. */
	| 'good'
	/** An invoice is open and exports go through until a date. */
	| 'grace'
	/** An invoice has been open for too long: no new exports. */
	| 'owing'
	/** Resting: no allowance, nothing owed. */
	| 'resting'
	/** Paid for until its end, which has come, while its last event has not. */
	| 'run-out'
	/** Never comes back to life. */
	| 'over'
	/** A status, or a price, that this code does not know. */
	| 'unknown';

export interface Access {
	standing: Standing;
	/** The plan's monthly exports and its seats count. */
	allowance: boolean;
	/** No new exports at all, those of packs included. Reading and verifying are never stopped by money. */
	blocked: boolean;
	/** Until when the allowance holds if nothing else happens; null where it does not. */
	until: Date | null;
	plan: Plan | undefined;
}

const day = 86_400_000;

/** Statuses from which none leads back. */
export const terminalStatuses: ReadonlySet<string> = new Set(['canceled', 'incomplete_expired']);

const denied = (standing: Standing, blocked: boolean, plan: Plan | undefined): Access => ({
	standing,
	allowance: false,
	blocked,
	until: null,
	plan
});

function paid(facts: SubscriptionFacts, plan: Plan, graceDays: number, now: Date): Access {
	const { paidUntil, periodEnd, cancelAtPeriodEnd } = facts;
	// Active before its first invoice is known to be paid: nothing yet.
	if (paidUntil === null) return denied('resting', false, plan);
	const graceEnd = new Date(paidUntil.getTime() + graceDays * day);
	const ends = cancelAtPeriodEnd && periodEnd < graceEnd ? periodEnd : graceEnd;
	if (now < paidUntil && now < ends) {
		return { standing: 'good', allowance: true, blocked: false, until: ends, plan };
	}
	if (now < ends) return { standing: 'grace', allowance: true, blocked: false, until: ends, plan };
	if (cancelAtPeriodEnd && now >= periodEnd && periodEnd <= paidUntil) return denied('run-out', false, plan);
	return denied('owing', true, plan);
}

/** The table of statuses. One that is not in it denies new exports and leaves reading alone. */
export function accessOf(facts: SubscriptionFacts, now: Date, plans: Plans): Access {
	const plan = planById(facts.planId, plans);
	if (terminalStatuses.has(facts.status)) return denied('over', false, plan);
	if (plan === undefined) return denied('unknown', true, plan);
	switch (facts.status) {
		case 'trialing':
			return now < facts.periodEnd
				? { standing: 'good', allowance: true, blocked: false, until: facts.periodEnd, plan }
				: denied('resting', false, plan);
		case 'active':
			return paid(facts, plan, plans.graceDays, now);
		case 'past_due': {
			const access = paid(facts, plan, plans.graceDays, now);
			// The payment service says that an invoice is open, even while an earlier one still covers the time.
			return access.standing === 'good' ? { ...access, standing: 'grace' } : access;
		}
		case 'unpaid':
			return denied('owing', true, plan);
		case 'paused':
		case 'incomplete':
			return denied('resting', false, plan);
		default:
			return denied('unknown', true, plan);
	}
}

const rank: Readonly<Record<Standing, number>> = {
	good: 0,
	grace: 1,
	owing: 2,
	unknown: 3,
	resting: 4,
	'run-out': 5,
	over: 6
};

/**
 * The one subscription that counts where an organisation has several: the best standing, then the longest paid for,
 * then the oldest, then by id; so every process picks the same.
 */
export function pickSubscription<S extends SubscriptionFacts>(
	all: readonly S[],
	now: Date,
	plans: Plans
): { subscription: S; access: Access } | undefined {
	const judged = all.map((subscription) => ({ subscription, access: accessOf(subscription, now, plans) }));
	judged.sort(
		(a, b) =>
			rank[a.access.standing] - rank[b.access.standing] ||
			(b.subscription.paidUntil?.getTime() ?? 0) - (a.subscription.paidUntil?.getTime() ?? 0) ||
			a.subscription.startedAt.getTime() - b.subscription.startedAt.getTime() ||
			(a.subscription.id < b.subscription.id ? -1 : 1)
	);
	return judged[0];
}
