import type { Entry } from '../entry';

/* Plan, seats, purchases: for owners and billing contacts. */

const paying = { needs: 'pay' } as const;
const seats = { route: '/(app)/billing/seats', ...paying } as const;

export const billingEntries: readonly Entry[] = [
	{ route: '/(app)/billing', what: 'page', at: '/billing', ...paying, done: '200' },
	{
		route: '/(app)/billing',
		what: 'action portal',
		at: '/billing',
		...paying,
		done: '303 payments/:new'
	},
	{ route: '/(app)/billing/review', what: 'page', at: '/billing/review?packs=1', ...paying, done: '200' },
	{
		route: '/(app)/billing/review',
		what: 'action default',
		at: '/billing/review',
		form: { packs: '1' },
		...paying,
		done: '303 payments/:new'
	},
	{
		route: '/(app)/billing/return',
		what: 'page',
		at: '/billing/return?session=:checkout',
		...paying,
		done: '200'
	},
	{ ...seats, what: 'page', at: '/billing/seats?seats=2', done: '200' },
	{
		...seats,
		what: 'action default',
		at: '/billing/seats',
		form: { seats: '2', mark: '3f2c5a5e-8f0e-4c86-9b1a-4d3c2b1a0f9e' },
		done: '409',
		why: 'without a plan there are no seats to change'
	}
];
