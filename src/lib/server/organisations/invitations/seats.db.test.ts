import { eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Membership } from '../../access/membership';
import type { Person } from '../../accounts/person';
import { hashToken, newToken } from '../../accounts/tokens';
import type { Database } from '../../db';
import { invitations, memberships, users } from '../../db/schema';
import { testDatabase } from '../../testing/db';
import { setTestEnvironment } from '../../testing/environment';
import { member } from '../../testing/members';
import { giveSeats } from '../../testing/seats';
import { countSeats, leaveOrganisation, removeMember } from '../members';
import { acceptInvitation, NoSeatError } from './accept';
import { newExpiry } from './state';

/* The rule of seats, over any sequence of what can happen to them. */

let db: Database;
let drop: () => Promise<void>;

beforeAll(async () => {
	setTestEnvironment();
	({ db, drop } = await testDatabase());
});
afterAll(() => drop());

const people = 5;

type Step =
	| { do: 'accept' | 'remove' | 'leave'; who: number }
	| { do: 'race'; who: number[] }
	| { do: 'seats'; to: number };

const who = fc.nat(people - 1);
const steps: fc.Arbitrary<Step[]> = fc.array(
	fc.oneof(
		{ weight: 4, arbitrary: fc.record({ do: fc.constant('accept' as const), who }) },
		{ weight: 1, arbitrary: fc.record({ do: fc.constantFrom('remove' as const, 'leave' as const), who }) },
		{
			weight: 2,
			arbitrary: fc.record({ do: fc.constant('race' as const), who: fc.uniqueArray(who, { minLength: 2 }) })
		},
		{
			weight: 2,
			arbitrary: fc.record({ do: fc.constant('seats' as const), to: fc.integer({ min: 1, max: 6 }) })
		}
	),
	{ maxLength: 14 }
);

interface House {
	owner: Membership;
	person: Person[];
}

async function house(): Promise<House> {
	const owner = await member(db, ['owner']);
	await giveSeats(db, owner.organisationId, 2);
	const made = await db
		.insert(users)
		.values(
			Array.from({ length: people }, (_, i) => ({
				name: `Person ${i}`,
				email: `p${i}.${owner.userId}@seats.example`,
				emailVerified: new Date()
			}))
		)
		.returning({ id: users.id, name: users.name, email: users.email });
	return { owner, person: made };
}

/** An open invitation of its own for each try, without a mail. */
async function invite({ owner }: House, person: Person): Promise<string> {
	const token = newToken();
	await db.delete(invitations).where(eq(invitations.email, person.email));
	await db.insert(invitations).values({
		organisationId: owner.organisationId,
		kind: 'member',
		email: person.email,
		roles: ['reader'],
		tokenHash: hashToken(token),
		expiresAt: newExpiry
	});
	return token;
}

function personOf(home: House, at: number): Person {
	const found = home.person[at];
	if (found === undefined) throw new Error('There is nobody of that number.');
	return found;
}

describe('seats', () => {
	it('never hold more members than are paid for, unless seats were given up: and then nobody comes in', async () => {
		await fc.assert(
			fc.asyncProperty(steps, async (sequence) => {
				const home = await house();
				const inside = new Set<number>();
				let limit = 2;
				for (const step of sequence) {
					const before = inside.size;
					if (step.do === 'seats') {
						limit = step.to;
						await giveSeats(db, home.owner.organisationId, limit);
					} else if (step.do === 'remove' || step.do === 'leave') {
						const person = personOf(home, step.who);
						const work =
							step.do === 'remove'
								? removeMember(home.owner, person.id, db)
								: leaveOrganisation(person, home.owner.organisationId, db);
						const gone = await work.then(
							() => true,
							() => false
						);
						expect(gone).toBe(inside.has(step.who));
						inside.delete(step.who);
					} else {
						const tried = step.do === 'race' ? step.who : [step.who];
						const tokens = await Promise.all(tried.map((one) => invite(home, personOf(home, one))));
						const outcomes = await Promise.allSettled(
							tried.map((one, i) => acceptInvitation(personOf(home, one), tokens[i] ?? '', db))
						);
						outcomes.forEach((outcome, i) => {
							if (outcome.status === 'fulfilled') inside.add(tried[i] ?? -1);
							else expect(outcome.reason).toBeInstanceOf(NoSeatError);
						});
						const newcomers = inside.size - before;
						// Nobody in beyond the limit, and nobody refused while a seat was free.
						if (newcomers > 0) expect(inside.size + 1).toBeLessThanOrEqual(limit);
						const refused = outcomes.filter(({ status }) => status === 'rejected').length;
						if (refused > 0) expect(inside.size + 1).toBeGreaterThanOrEqual(limit);
					}
					const taken = await db.$count(
						memberships,
						eq(memberships.organisationId, home.owner.organisationId)
					);
					expect(taken).toBe(inside.size + 1);
					expect(await countSeats(home.owner, db)).toEqual({ taken, limit });
				}
			}),
			{ numRuns: 40 }
		);
	}, 120_000);
});
