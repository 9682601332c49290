import type { Membership, MemberRole } from '../access/membership';
import type { Person } from '../accounts/person';
import { createConfirmedAccount } from '../accounts/people';
import type { Database } from '../db';
import { memberships, organisations } from '../db/schema';

/** A password that the rules accept, for accounts of tests. */
export const testPassword = 'umbrella kettle voyage 9';

let count = 0;

/** A confirmed account with a name and an address of its own. */
export async function testPerson(db: Database, name = 'Rhea Aldous'): Promise<Person> {
	const email = `person${++count}.${Date.now()}@test.example`;
	return { id: await createConfirmedAccount(db, { name, email, password: testPassword }), name, email };
}

/** An organisation with one member in the given roles. */
export async function testOrganisation(
	db: Database,
	person: Person,
	roles: readonly MemberRole[] = ['owner', 'author', 'reviewer', 'billing'],
	name = 'Tallis Brook Consulting'
): Promise<Membership> {
	const [row] = await db
		.insert(organisations)
		.values({ name, numberPrefix: 'TB' })
		.returning({ id: organisations.id });
	if (row === undefined) throw new Error('The organisation was not created.');
	await db.insert(memberships).values({ organisationId: row.id, userId: person.id, roles: [...roles] });
	return { organisationId: row.id, organisationName: name, userId: person.id, roles, onlyDossiers: null };
}
