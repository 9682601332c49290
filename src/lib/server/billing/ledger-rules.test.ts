import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { missingMonth, spendable, takenByRefund, type Allowance, type GrantFacts } from './ledger-rules';
import shipped from './plans.json';
import { parsePlans } from './plans';

const plans = parsePlans(shipped);
const practice = plans.plans.find(({ id }) => id === 'practice');
if (practice === undefined) throw new Error('The plans have changed.');
const anchor = new Date('2027-01-31T09:00:00Z');
const now = new Date('2027-03-10T12:00:00Z');
const day = 86_400_000;

const allowance = (quantity = 2, blocked = false): Allowance => ({
	subscription: { id: 'sub_1', anchor, quantity, plan: practice },
	blocked
});
const without: Allowance = { subscription: null, blocked: false };

const grant = (own: Partial<GrantFacts>): GrantFacts => ({
	id: 'g',
	kind: 'pack',
	key: 'pack:cs_1',
	amount: 10,
	left: 10,
	validFrom: anchor,
	validUntil: new Date(now.getTime() + 100 * day),
	...own
});

describe('spendable', () => {
	const pack = grant({ id: 'late' });
	const soon = grant({ id: 'soon', validUntil: new Date(now.getTime() + day) });
	const trial = grant({ id: 'trial', kind: 'trial', key: 'trial:u', validUntil: null });
	const month = grant({ id: 'month', kind: 'month', key: 'month:sub_1:2027-02-28T09:00:00.000Z:16' });
	const ids = (all: GrantFacts[], given: Allowance) => spendable(all, given, now).map(({ id }) => id);

	it('uses the month first, then the trial, then the pack that ends first', () => {
		expect(ids([pack, trial, soon, month], allowance())).toEqual(['month', 'trial', 'soon', 'late']);
	});

	it('leaves out what is used up, over, not begun, of another subscription or of another month', () => {
		const empty = grant({ id: 'empty', left: 0 });
		const over = grant({ id: 'over', validUntil: now });
		const early = grant({ id: 'early', validFrom: new Date(now.getTime() + 1) });
		const other = { kind: 'month' as const, validUntil: new Date(now.getTime() + day) };
		const foreign = grant({ ...other, id: 'foreign', key: 'month:sub_10:2027-02-28T09:00:00.000Z:16' });
		const former = grant({ ...other, id: 'former', key: 'month:sub_1:2027-02-20T09:00:00.000Z:16' });
		expect(ids([empty, over, early, foreign, former, pack], allowance())).toEqual(['late']);
	});

	it('keeps packs usable without a plan, and nothing while something is owed', () => {
		expect(ids([month, pack], without)).toEqual(['late']);
		expect(ids([month, pack, trial], allowance(2, true))).toEqual([]);
	});
});

describe('missingMonth', () => {
	it('gives seats times exports for the month around now', () => {
		expect(missingMonth([], allowance(3), now)).toEqual({
			key: 'month:sub_1:2027-02-28T09:00:00.000Z:24',
			amount: 24,
			window: { start: new Date('2027-02-28T09:00:00Z'), end: new Date('2027-03-31T09:00:00Z') }
		});
		expect(missingMonth([], without, now)).toBeUndefined();
	});

	it('adds for seats that are added, takes none for seats that go, and never gives the same twice', () => {
		fc.assert(
			fc.property(fc.array(fc.integer({ min: 2, max: 20 }), { minLength: 1, maxLength: 12 }), (seats) => {
				const grants: GrantFacts[] = [];
				for (const quantity of seats) {
					const missing = missingMonth(grants, allowance(quantity), now);
					if (missing === undefined) continue;
					expect(missing.amount).toBeGreaterThan(0);
					expect(grants.some(({ key }) => key === missing.key)).toBe(false);
					grants.push(grant({ kind: 'month', key: missing.key, amount: missing.amount }));
				}
				const given = grants.reduce((sum, { amount }) => sum + amount, 0);
				expect(given).toBe(Math.max(...seats) * practice.exportsPerSeat);
			})
		);
	});
});

describe('takenByRefund', () => {
	it.each([
		[10, 0, 4500, 4500, 10],
		[10, 4, 4500, 4500, 6],
		[10, 10, 4500, 4500, 0],
		[10, 0, 4500, 2250, 5],
		[10, 0, 4500, 1, 1],
		[10, 0, 4500, 0, 0],
		[20, 15, 9000, 4500, 5],
		[10, 0, 0, 100, 0]
	])('%i granted, %i used, %i paid, %i returned: %i', (granted, used, paid, returned, taken) => {
		expect(takenByRefund(granted, used, { paid, returned })).toBe(taken);
	});

	it('never takes more than is there, and more money never takes less', () => {
		const amount = fc.integer({ min: 0, max: 200 });
		fc.assert(
			fc.property(amount, amount, fc.nat(9000), fc.nat(9000), (granted, part, returned, more) => {
				const used = Math.min(part, granted);
				const taken = takenByRefund(granted, used, { paid: 9000, returned });
				expect(taken).toBeGreaterThanOrEqual(0);
				expect(used + taken).toBeLessThanOrEqual(granted);
				const further = takenByRefund(granted, used, { paid: 9000, returned: returned + more });
				expect(further).toBeGreaterThanOrEqual(taken);
			})
		);
	});
});

describe('a ledger over time', () => {
	/** What happens to it, in any order. */
	const step = fc.oneof(
		fc.record({ what: fc.constant('pack' as const), amount: fc.integer({ min: 1, max: 30 }) }),
		fc.record({ what: fc.constant('seats' as const), amount: fc.integer({ min: 2, max: 20 }) }),
		fc.record({ what: fc.constant('issue' as const), amount: fc.constant(1) }),
		fc.record({ what: fc.constant('refund' as const), amount: fc.integer({ min: 1, max: 100 }) }),
		fc.record({ what: fc.constant('days' as const), amount: fc.integer({ min: 1, max: 60 }) })
	);

	it('never falls below nothing, and what is left is what was given less what was taken', () => {
		fc.assert(
			fc.property(fc.array(step, { maxLength: 60 }), (steps) => {
				const grants: (GrantFacts & { used: number; returned: number })[] = [];
				let seats = 2;
				let at = now.getTime();
				let issued = 0;
				for (const { what, amount } of steps) {
					const clock = new Date(at);
					if (what === 'days') at += amount * day;
					else if (what === 'seats') seats = amount;
					else if (what === 'pack') {
						const validUntil = new Date(at + 365 * day);
						const own = { id: `p${grants.length}`, amount, left: amount, validFrom: clock, validUntil };
						grants.push({ ...grant(own), used: 0, returned: 0 });
					} else if (what === 'refund') {
						const pack = grants.find(({ kind, returned }) => kind === 'pack' && returned === 0);
						if (pack === undefined) continue;
						pack.returned = takenByRefund(pack.amount, pack.used, { paid: 100, returned: amount });
						pack.left = pack.amount - pack.used - pack.returned;
					} else {
						const missing = missingMonth(grants, allowance(seats), clock);
						if (missing !== undefined) {
							const { key, window } = missing;
							const own = { id: key, key, amount: missing.amount, left: missing.amount };
							const valid = { validFrom: window.start, validUntil: window.end };
							grants.push({ ...grant({ ...own, ...valid, kind: 'month' }), used: 0, returned: 0 });
						}
						const [first] = spendable(grants, allowance(seats), clock);
						if (first === undefined) continue;
						first.left -= 1;
						first.used += 1;
						issued += 1;
					}
				}
				for (const { amount, left, used, returned } of grants) {
					expect(left).toBeGreaterThanOrEqual(0);
					expect(left).toBe(amount - used - returned);
				}
				expect(grants.reduce((sum, { used }) => sum + used, 0)).toBe(issued);
			})
		);
	});
});
