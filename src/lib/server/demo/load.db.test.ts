import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openShop, type Shop } from '../billing/testing/shop';
import type { Database } from '../db';
import {
	dossierGuests,
	invitations,
	organisations,
	reports,
	reviews,
	subscriptions,
	users
} from '../db/schema';
import { testDatabase } from '../testing/db';
import { loadDemo, type LoadedDemo } from './load';

let db: Database;
let drop: () => Promise<void>;
let shop: Shop;
let loaded: LoadedDemo;

const password = 'amber basalt willow ridge';

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	shop = await openShop(db);
	// The invitation stands although no mail server takes it.
	loaded = await loadDemo(db, password);
});
afterAll(async () => {
	await shop.stop();
	await drop();
});

async function statesOf(name: string): Promise<string[]> {
	const rows = await db
		.select({ state: reports.state, title: reports.title })
		.from(reports)
		.innerJoin(organisations, eq(organisations.id, reports.organisationId))
		.where(eq(organisations.name, name));
	return rows.map(({ state, title }) => `${title}: ${state}`).sort();
}

async function counts(): Promise<number[]> {
	return Promise.all(
		[users, organisations, reports, reviews, subscriptions, invitations, dossierGuests].map((table) =>
			db.$count(table)
		)
	);
}

describe('the demo', () => {
	it('shows reports in every state on the way to an issue', async () => {
		// The issues wait for a worker, which this test has none of.
		expect(await statesOf('Tallis Brook Consulting')).toEqual([
			'Coated roof sheet, blocks C to F, Marrow Coast: approved',
			'Dark yard paving, blocks A and B: returned',
			'Ground at the landing site, sunlit side: approved',
			'Pale yard paving, blocks A and B: in-review'
		]);
		expect(await statesOf('The Ferrow Courier')).toEqual(['Orrin’s “mild 38 degC”: approved']);
		expect(await statesOf('Idris Venn')).toEqual([
			'Green granules for the play yard: approved',
			'Sand-coloured granules for the play yard: approved',
			'Wood chippings for the play yard: in-review'
		]);
	});

	it('has a guest reviewer, an open invitation, a plan that runs and one that was cancelled', async () => {
		const guests = await db
			.select({ name: users.name, organisation: organisations.name })
			.from(dossierGuests)
			.innerJoin(users, eq(users.id, dossierGuests.userId))
			.innerJoin(organisations, eq(organisations.id, dossierGuests.organisationId));
		expect(guests).toEqual([{ name: 'Maren Stole', organisation: 'Idris Venn' }]);
		const plans = await db
			.select({
				name: organisations.name,
				status: subscriptions.status,
				seats: subscriptions.quantity,
				ends: subscriptions.cancelAtPeriodEnd
			})
			.from(subscriptions)
			.innerJoin(organisations, eq(organisations.id, subscriptions.organisationId))
			.orderBy(organisations.name);
		expect(plans).toEqual([
			{ name: 'Tallis Brook Consulting', status: 'active', seats: 6, ends: false },
			{ name: 'The Ferrow Courier', status: 'active', seats: 2, ends: true }
		]);
		const invited = await db
			.select({ email: invitations.email, acceptedAt: invitations.acceptedAt })
			.from(invitations);
		expect(invited).toEqual([{ email: 'petra.lisk@tallisbrook.example', acceptedAt: null }]);
	});

	it('names everybody who can sign in, the founders first', () => {
		expect(loaded.signIns.map(({ name }) => name)).toEqual([
			'Ines Tarrow',
			'Oda Merrick',
			'Idris Venn',
			'Colm Hadley',
			'Bess Orrell',
			'Tavi Orme',
			'Maren Stole'
		]);
	});

	it('is loaded once, however often it is asked for', async () => {
		const before = await counts();
		await loadDemo(db, password);
		expect(await counts()).toEqual(before);
	});
});
