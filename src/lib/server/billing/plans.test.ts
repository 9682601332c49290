import { describe, expect, it } from 'vitest';
import { amountText } from './money';
import shipped from './plans.json';
import { parsePlans, planById, planForSeats, seatBounds } from './plans';

const plans = parsePlans(shipped);

describe('the shipped plans', () => {
	it('are the three of the product, with their seats and exports', () => {
		expect(plans.plans.map((plan) => [plan.name, seatBounds(plan), plan.exportsPerSeat])).toEqual([
			['Individual', '1 seat', 5],
			['Practice', '2 to 20 seats', 8],
			['Organisation', '21 to 500 seats', 10]
		]);
		expect(plans.plans.map(({ singleSignOn }) => singleSignOn)).toEqual([false, false, true]);
		expect(plans.pack).toMatchObject({ exports: 10, months: 12 });
		expect(plans.trial).toEqual({ seats: 1, exports: 2 });
		expect(plans.graceDays).toBe(7);
		expect(plans.note).toContain('invented');
	});

	it('name one plan for every number of seats', () => {
		expect([1, 2, 20, 21, 500].map((seats) => planForSeats(seats, plans)?.id)).toEqual([
			'individual',
			'practice',
			'practice',
			'organisation',
			'organisation'
		]);
		expect(planForSeats(501, plans)).toBeUndefined();
		expect(planById('gold', plans)).toBeUndefined();
	});
});

describe('parsePlans', () => {
	it.each([
		['a price below one', { pack: { ...shipped.pack, price: 0 } }, /pack\.price/],
		['a part of a cent', { pack: { ...shipped.pack, price: 10.5 } }, /pack\.price/],
		['one id twice', { plans: [shipped.plans[0], shipped.plans[0]] }, /two plans have one id/],
		['overlapping seats', { plans: [...shipped.plans].reverse() }, /overlap/],
		['no plan', { plans: [] }, /plans/]
	])('refuses %s', (_what, own, problem) => {
		expect(() => parsePlans({ ...shipped, ...own })).toThrow(problem);
	});
});

describe('amountText', () => {
	it('knows how many places a currency has', () => {
		expect(amountText(2400, 'eur')).toBe('€24.00');
		expect(amountText(-5, 'eur')).toBe('-€0.05');
		expect(amountText(1200, 'jpy')).toBe('JP¥1,200');
	});
});
