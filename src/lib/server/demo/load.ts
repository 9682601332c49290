import { eq } from 'drizzle-orm';
import type { Membership, Role } from '../access/membership';
import { hashPassword } from '../accounts/passwords';
import { createConfirmedAccount, findAccountByEmail, storePassword } from '../accounts/people';
import type { Person } from '../accounts/person';
import type { Database } from '../db';
import { users } from '../db/schema';
import { createOrganisation } from '../organisations/create';
import { listMembers } from '../organisations/members';
import { membershipsOf } from '../organisations/memberships';
import { enrolForSetUp } from '../organisations/set-up';
import { demoGuests, demoOrganisations } from './content/organisations';
import { ensureInvitation, ensurePlan } from './standing';
import { loadDemoWork } from './work';

/** Marks the demo's people: nobody else's account is ever touched. */
const demoMark = 'noonmark-demo';

export interface DemoSignIn {
	name: string;
	email: string;
	password: string;
	organisation: string;
	roles: readonly Role[];
}

export interface LoadedDemo {
	/** The founders first: each sees another organisation. */
	signIns: DemoSignIn[];
	/** By organisation name, for what is loaded on top. */
	memberships: Record<string, Membership>;
}

/** @throws Error if the address belongs to somebody who is not of the demo */
async function ensurePerson(
	db: Database,
	person: { name: string; email: string },
	password: string
): Promise<Person> {
	const account = await findAccountByEmail(db, person.email);
	if (account === null) {
		const id = await createConfirmedAccount(db, { ...person, password, demo: demoMark });
		return { id, name: person.name, email: person.email };
	}
	const [row] = await db.select({ demo: users.demo }).from(users).where(eq(users.id, account.id));
	if (row?.demo !== demoMark) {
		throw new Error(`${person.email} is somebody's own account here, so the demo cannot be loaded.`);
	}
	await storePassword(db, account.id, await hashPassword(password));
	return { id: account.id, name: account.name, email: account.email };
}

/**
 * Makes sure that the demo's organisations and people are there and take this password. Running it again changes
 * nothing else: what visitors of the demo have written since stays.
 * @param password of all demo people; made by the caller, so that no copy has a password known to others
 */
export async function loadDemo(db: Database, password: string): Promise<LoadedDemo> {
	const loaded: LoadedDemo = { signIns: [], memberships: {} };
	const people = new Map<string, Person>();
	const ensure = async (person: { name: string; email: string }): Promise<Person> => {
		const found = await ensurePerson(db, person, password);
		people.set(person.email, found);
		return found;
	};
	const colleagues: DemoSignIn[] = [];
	for (const { people: listed, plan, invited, ...organisation } of demoOrganisations) {
		const [founder, ...others] = listed;
		const person = await ensure(founder);
		const own = await membershipsOf(person, db);
		const membership =
			own.find((one) => one.organisationName === organisation.name) ??
			(await createOrganisation(person, organisation, db));
		loaded.memberships[organisation.name] = membership;
		loaded.signIns.push({ ...founder, password, organisation: organisation.name });
		const members = await listMembers(membership, db);
		for (const other of others) {
			const colleague = await ensure(other);
			if (!members.some(({ userId }) => userId === colleague.id)) await enrolForSetUp(membership, other, db);
			colleagues.push({ ...other, password, organisation: organisation.name });
		}
		if (plan !== undefined) await ensurePlan(membership, plan, db);
		if (invited !== undefined) await ensureInvitation(membership, invited, db);
	}
	for (const guest of demoGuests) {
		await ensure(guest);
		colleagues.push({ ...guest, password, organisation: 'Idris Venn', roles: ['guest'] });
	}
	loaded.signIns.push(...colleagues);
	await loadDemoWork(loaded.memberships, people, db);
	return loaded;
}
