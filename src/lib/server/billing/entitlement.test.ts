import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { accessOf, pickSubscription, type Standing, type SubscriptionFacts } from './entitlement';
import shipped from './plans.json';
import { parsePlans } from './plans';

const plans = parsePlans(shipped);
const day = 86_400_000;
const now = new Date('2027-03-10T12:00:00Z');
const inDays = (days: number) => new Date(now.getTime() + days * day);

const facts = (own: Partial<SubscriptionFacts> = {}): SubscriptionFacts => ({
	id: 'sub_1',
	status: 'active',
	planId: 'practice',
	quantity: 5,
	startedAt: inDays(-40),
	periodEnd: inDays(20),
	paidUntil: inDays(20),
	cancelAtPeriodEnd: false,
	...own
});

describe('accessOf', () => {
	it.each<[string, Partial<SubscriptionFacts>, Standing, boolean, boolean]>([
		['trialing', { status: 'trialing', paidUntil: null }, 'good', true, false],
		['trialing past its end', { status: 'trialing', periodEnd: inDays(-1) }, 'resting', false, false],
		['active', {}, 'good', true, false],
		['active, no invoice paid yet', { paidUntil: null }, 'resting', false, false],
		['active, renewed and not paid', { paidUntil: inDays(-1), periodEnd: inDays(29) }, 'grace', true, false],
		[
			'active, not paid for eight days',
			{ paidUntil: inDays(-8), periodEnd: inDays(22) },
			'owing',
			false,
			true
		],
		['past due within grace', { status: 'past_due', paidUntil: inDays(-6.9) }, 'grace', true, false],
		['past due after grace', { status: 'past_due', paidUntil: inDays(-7) }, 'owing', false, true],
		['past due, time still covered', { status: 'past_due' }, 'grace', true, false],
		['unpaid', { status: 'unpaid' }, 'owing', false, true],
		['paused', { status: 'paused' }, 'resting', false, false],
		['incomplete', { status: 'incomplete' }, 'resting', false, false],
		['incomplete_expired', { status: 'incomplete_expired' }, 'over', false, false],
		['canceled', { status: 'canceled' }, 'over', false, false],
		['a status of tomorrow', { status: 'hibernating' }, 'unknown', false, true],
		['no status', { status: '' }, 'unknown', false, true],
		['a price that is none of ours', { planId: null }, 'unknown', false, true],
		['a plan that is not offered any more', { planId: 'gold' }, 'unknown', false, true],
		['canceled, of a strange price', { status: 'canceled', planId: null }, 'over', false, false],
		['to be cancelled', { cancelAtPeriodEnd: true }, 'good', true, false],
		[
			'cancelled, its end come, its last event not',
			{ cancelAtPeriodEnd: true, periodEnd: inDays(-1), paidUntil: inDays(-1) },
			'run-out',
			false,
			false
		]
	])('%s', (_what, own, standing, allowance, blocked) => {
		expect(accessOf(facts(own), now, plans)).toMatchObject({ standing, allowance, blocked });
	});

	it('says until when: grace after what is paid, the period’s end once it is cancelled', () => {
		expect(accessOf(facts(), now, plans).until).toEqual(inDays(27));
		expect(accessOf(facts({ cancelAtPeriodEnd: true }), now, plans).until).toEqual(inDays(20));
		expect(accessOf(facts({ status: 'past_due', paidUntil: inDays(-2) }), now, plans).until).toEqual(
			inDays(5)
		);
	});

	it('gives an allowance to statuses of the table only, whatever else is true', () => {
		const when = fc.date({ min: inDays(-400), max: inDays(400), noInvalidDate: true });
		const any = fc.record({
			id: fc.string(),
			status: fc.oneof(
				fc.string(),
				fc.constantFrom('active', 'past_due', 'trialing', 'unpaid', 'paused', 'canceled', 'incomplete')
			),
			planId: fc.option(fc.constantFrom('individual', 'practice', 'organisation', 'gold')),
			quantity: fc.nat(100),
			startedAt: when,
			periodEnd: when,
			paidUntil: fc.option(when),
			cancelAtPeriodEnd: fc.boolean()
		});
		fc.assert(
			fc.property(any, (one) => {
				const { allowance, blocked, until, plan } = accessOf(one, now, plans);
				expect(allowance && blocked).toBe(false);
				if (!allowance) return;
				expect(['active', 'past_due', 'trialing']).toContain(one.status);
				expect(plan?.id).toBe(one.planId);
				expect(until !== null && now < until).toBe(true);
				if (one.cancelAtPeriodEnd) expect(now < one.periodEnd).toBe(true);
			})
		);
	});
});

describe('pickSubscription', () => {
	it('takes the good one of two, in whatever order they are read', () => {
		const good = facts({ id: 'sub_good' });
		const over = facts({ id: 'sub_over', status: 'canceled', startedAt: inDays(-400) });
		const owing = facts({ id: 'sub_owing', status: 'unpaid', paidUntil: inDays(300) });
		for (const all of [
			[good, over, owing],
			[owing, over, good],
			[over, owing, good]
		]) {
			expect(pickSubscription(all, now, plans)?.subscription.id).toBe('sub_good');
		}
		expect(pickSubscription([over, owing], now, plans)?.access.blocked).toBe(true);
		expect(pickSubscription([over], now, plans)?.access.standing).toBe('over');
		expect(pickSubscription([], now, plans)).toBeUndefined();
	});

	it('takes the longer paid for, then the older, of two that are good', () => {
		const older = facts({ id: 'sub_b', startedAt: inDays(-90) });
		const longer = facts({ id: 'sub_c', paidUntil: inDays(25) });
		expect(pickSubscription([facts({ id: 'sub_a' }), older], now, plans)?.subscription.id).toBe('sub_b');
		expect(pickSubscription([older, longer], now, plans)?.subscription.id).toBe('sub_c');
	});
});
