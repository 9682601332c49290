import { monthAround, type MonthWindow } from './months';
import type { Plan } from './plans';

/* The rules of the ledger of exports, without the database that keeps it. */

export type GrantKind = 'trial' | 'month' | 'pack';

/** A grant with what is left of it: its amount less the debits on it. */
export interface GrantFacts {
	id: string;
	kind: GrantKind;
	key: string;
	amount: number;
	left: number;
	validFrom: Date;
	validUntil: Date | null;
}

/** What the organisation's subscription allows at this moment. */
export interface Allowance {
	/** Null without a subscription whose monthly exports count. */
	subscription: { id: string; anchor: Date; quantity: number; plan: Plan } | null;
	blocked: boolean;
}

const order: Readonly<Record<GrantKind, number>> = { month: 0, trial: 1, pack: 2 };

/** The running month of a subscription, and how the keys of its grants begin. */
function runningMonth({ id, anchor }: NonNullable<Allowance['subscription']>, now: Date) {
	const window = monthAround(anchor, now);
	return { window, prefix: `month:${id}:${window.start.toISOString()}:` };
}

/**
 * The grants that an export may be taken from now, in the order in which they are: what runs out goes first. Of months
 * only the running one counts: where a change of plan begins another, what was left of the former goes with it.
 */
export function spendable<G extends GrantFacts>(grants: readonly G[], allowance: Allowance, now: Date): G[] {
	if (allowance.blocked) return [];
	const month = allowance.subscription === null ? null : runningMonth(allowance.subscription, now);
	return grants
		.filter(
			({ kind, key, left, validFrom, validUntil }) =>
				left > 0 &&
				validFrom <= now &&
				(validUntil === null || now < validUntil) &&
				(kind !== 'month' || (month !== null && key.startsWith(month.prefix)))
		)
		.sort(
			(a, b) =>
				order[a.kind] - order[b.kind] ||
				(a.validUntil?.getTime() ?? Infinity) - (b.validUntil?.getTime() ?? Infinity) ||
				(a.id < b.id ? -1 : 1)
		);
}

/** A grant that this month still lacks. */
export interface MonthGrant {
	key: string;
	amount: number;
	window: MonthWindow;
}

/**
 * What has to be granted so that the running month holds what its seats give. Given lazily, so that no clock has to
 * strike; a further seat within the month adds its exports, a seat less takes none away before the month is over.
 */
export function missingMonth(
	grants: readonly GrantFacts[],
	allowance: Allowance,
	now: Date
): MonthGrant | undefined {
	const { subscription } = allowance;
	if (subscription === null) return undefined;
	const { window, prefix } = runningMonth(subscription, now);
	const given = grants
		.filter(({ kind, key }) => kind === 'month' && key.startsWith(prefix))
		.reduce((sum, { amount }) => sum + amount, 0);
	const total = subscription.quantity * subscription.plan.exportsPerSeat;
	return total > given ? { key: `${prefix}${total}`, amount: total - given, window } : undefined;
}

/**
 * Exports of a pack that a refund takes back: in proportion to the money, rounded up; never one that was used, so
 * that no balance falls below nothing.
 * @param granted exports of the pack
 * @param used of them, by issued reports
 * @param money what was paid and what of it was returned, in the same unit
 */
export function takenByRefund(
	granted: number,
	used: number,
	money: { paid: number; returned: number }
): number {
	if (money.paid <= 0 || money.returned <= 0) return 0;
	const share = Math.min(1, money.returned / money.paid);
	return Math.max(0, Math.min(Math.ceil(granted * share), granted - used));
}
