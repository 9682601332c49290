import { InvalidInputError } from '../access/errors';
import {
	planById,
	planForSeats,
	seatBounds,
	seatLookupKey,
	packLookupKey,
	type Interval,
	type Plan,
	type Plans
} from './plans';

/** What somebody sets out to buy, as a form gives it. */
export type PurchaseInput =
	/** Without a plan it is the one for these seats. */
	{ plan?: string; interval: Interval; seats: number } | { packs: number };

export type Purchase =
	| { kind: 'subscription'; plan: Plan; interval: Interval; quantity: number }
	| { kind: 'pack'; plan: null; interval: null; quantity: number };

const counted = (n: number, one: string, many: string) => `${n} ${n === 1 ? one : many}`;

/**
 * Seats that a plan can have and that the members fit in.
 * @param taken members at present
 * @throws InvalidInputError that says what to choose instead
 */
export function requireSeats(plan: Plan, seats: number, taken: number, plans: Plans): void {
	if (seats < taken) {
		throw new InvalidInputError('These are too few seats.', {
			seats: `${counted(taken, 'member holds a seat', 'members hold a seat each')}: choose at least ${taken}, or take members out first.`
		});
	}
	if (plan.seats.from <= seats && seats <= plan.seats.to) return;
	const fitting = planForSeats(seats, plans);
	throw new InvalidInputError('These seats are not of this plan.', {
		seats: `${plan.name} is for ${seatBounds(plan)}${fitting === undefined ? '.' : `: for ${counted(seats, 'seat', 'seats')} choose ${fitting.name}.`}`
	});
}

/** @throws InvalidInputError */
export function readPurchase(input: PurchaseInput, taken: number, plans: Plans): Purchase {
	if ('packs' in input) {
		const { packs } = input;
		if (!Number.isInteger(packs) || packs < 1 || packs > plans.pack.most) {
			throw new InvalidInputError('This number of packs cannot be bought at once.', {
				packs: `Choose between 1 and ${plans.pack.most} packs.`
			});
		}
		return { kind: 'pack', plan: null, interval: null, quantity: packs };
	}
	if (!Number.isInteger(input.seats) || input.seats < 1) {
		throw new InvalidInputError('The seats are no number.', { seats: 'Give the seats as a whole number.' });
	}
	const plan = input.plan === undefined ? planForSeats(input.seats, plans) : planById(input.plan, plans);
	if (plan === undefined) {
		const most = Math.max(...plans.plans.map(({ seats }) => seats.to));
		const fields: Record<string, string> =
			input.plan === undefined
				? { seats: `No plan has so many seats: ${most} at most.` }
				: { plan: 'Choose one of the plans.' };
		throw new InvalidInputError('There is no such plan.', fields);
	}
	requireSeats(plan, input.seats, taken, plans);
	return { kind: 'subscription', plan, interval: input.interval, quantity: input.seats };
}

export interface Quote {
	lookupKey: string;
	/** For one seat or one pack. */
	each: number;
	total: number;
	currency: string;
}

/** What a purchase costs by the plans, in the smallest unit of the currency. */
export function quote(purchase: Purchase, plans: Plans): Quote {
	const each = purchase.kind === 'pack' ? plans.pack.price : purchase.plan.seatPrice[purchase.interval];
	return {
		lookupKey: purchase.kind === 'pack' ? packLookupKey : seatLookupKey(purchase.plan, purchase.interval),
		each,
		total: each * purchase.quantity,
		currency: plans.currency
	};
}
