import { readFileSync } from 'node:fs';
import { z } from 'zod';
import shipped from './plans.json';

/* The plans are data: `plans.json`, or the file that PLANS_FILE names. This reads and checks them. */

const whole = z.number().int().min(1);

const planSchema = z.object({
	id: z.string().regex(/^[a-z][a-z-]*$/),
	name: z.string().min(1),
	seats: z.object({ from: whole, to: whole }).refine(({ from, to }) => from <= to, 'from is above to'),
	/** Exports a month for each seat, pooled by the organisation. */
	exportsPerSeat: whole,
	singleSignOn: z.boolean(),
	/** For one seat, in the smallest unit of the currency. */
	seatPrice: z.object({ month: whole, year: whole })
});

const plansSchema = z
	.object({
		note: z.string(),
		currency: z.string().regex(/^[a-z]{3}$/),
		/** Days after the end of what is paid for on which exports still go through. */
		graceDays: z.number().int().min(0),
		trial: z.object({ seats: whole, exports: z.number().int().min(0) }),
		plans: z.array(planSchema).min(1),
		pack: z.object({ exports: whole, months: whole, price: whole, most: whole })
	})
	.refine(({ plans }) => new Set(plans.map(({ id }) => id)).size === plans.length, 'two plans have one id')
	.refine(
		({ plans }) => plans.every((plan, i) => i === 0 || plan.seats.from > (plans[i - 1]?.seats.to ?? 0)),
		'the seats of plans overlap or are out of order'
	);

export type Plans = z.infer<typeof plansSchema>;
export type Plan = z.infer<typeof planSchema>;
export const intervals = ['month', 'year'] as const;
export type Interval = (typeof intervals)[number];

/** @throws Error that names what is wrong with the data */
export function parsePlans(data: unknown): Plans {
	const parsed = plansSchema.safeParse(data);
	if (parsed.success) return parsed.data;
	const faults = parsed.error.issues.map(({ path, message }) => `${path.join('.')}: ${message}`);
	throw new Error(`The plans cannot be read. ${faults.join('; ')}`);
}

let read: Plans | undefined;

/** The service's plans, read once. @throws Error where the file is missing or wrong */
export function plans(): Plans {
	if (read === undefined) {
		// Read by itself: who counts exports need not have the service's secrets.
		const file = process.env.PLANS_FILE ?? '';
		read = parsePlans(file === '' ? shipped : JSON.parse(readFileSync(file, 'utf8')));
	}
	return read;
}

export function planById(id: string | null, all: Plans = plans()): Plan | undefined {
	return all.plans.find((plan) => plan.id === id);
}

/** The plan for a number of seats; undefined for more than any plan has. */
export function planForSeats(seats: number, all: Plans = plans()): Plan | undefined {
	return all.plans.find(({ seats: { from, to } }) => from <= seats && seats <= to);
}

/** "1 seat", "2 to 20 seats": what a plan is for. */
export function seatBounds({ seats: { from, to } }: Plan): string {
	if (from === to) return `${from} ${from === 1 ? 'seat' : 'seats'}`;
	return `${from} to ${to} seats`;
}

/** Name by which the payment service finds the price of a seat. */
export function seatLookupKey(plan: Plan, interval: Interval): string {
	return `noonmark-${plan.id}-${interval}`;
}

export const packLookupKey = 'noonmark-pack';
