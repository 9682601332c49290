import { eq } from 'drizzle-orm';
import type { Membership, MemberRole } from '../access/membership';
import { hashPassword } from '../accounts/passwords';
import { createConfirmedAccount, findAccountByEmail, storePassword } from '../accounts/people';
import type { Person } from '../accounts/person';
import type { Database } from '../db';
import { users } from '../db/schema';
import { createOrganisation } from '../organisations/create';
import { addMember, listMembers } from '../organisations/members';
import { membershipsOf } from '../organisations/memberships';
import { loadDemoWork } from './work';

/** Marks the demo's people: nobody else's account is ever touched. */
const demoMark = 'noonmark-demo';

interface DemoPerson {
	name: string;
	email: string;
	roles: readonly MemberRole[];
}

interface DemoOrganisation {
	name: string;
	address: string[];
	numberPrefix: string;
	/** The first founds it. */
	people: readonly [DemoPerson, ...DemoPerson[]];
}

/** All invented. */
const demoOrganisations: readonly DemoOrganisation[] = [
	{
		name: 'Tallis Brook Consulting',
		address: ['14 Weir Lane', 'Tallis Brook', 'Marrow Coast'],
		numberPrefix: 'TB',
		people: [
			{
				name: 'Ines Tarrow',
				email: 'ines.tarrow@tallisbrook.example',
				roles: ['owner', 'author', 'reviewer', 'billing']
			},
			{ name: 'Colm Hadley', email: 'colm.hadley@tallisbrook.example', roles: ['reviewer', 'reader'] }
		]
	},
	{
		name: 'The Ferrow Courier',
		address: ['2 Printers’ Yard', 'Ferrow'],
		numberPrefix: 'FC',
		people: [
			{
				name: 'Oda Merrick',
				email: 'oda.merrick@ferrowcourier.example',
				roles: ['owner', 'author', 'reviewer', 'billing']
			}
		]
	},
	{
		name: 'Idris Venn',
		address: ['9 Harbour Steps', 'Marrow Coast'],
		numberPrefix: 'IV',
		people: [
			{
				name: 'Idris Venn',
				email: 'idris.venn@venn.example',
				roles: ['owner', 'author', 'reviewer', 'billing']
			}
		]
	}
];

export interface DemoSignIn {
	name: string;
	email: string;
	password: string;
	organisation: string;
	roles: readonly MemberRole[];
}

export interface LoadedDemo {
	/** The founders first: each sees another organisation. */
	signIns: DemoSignIn[];
	/** By organisation name, for what is loaded on top. */
	memberships: Record<string, Membership>;
}

/** @throws Error if the address belongs to somebody who is not of the demo */
async function ensurePerson(db: Database, person: DemoPerson, password: string): Promise<Person> {
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
	const colleagues: DemoSignIn[] = [];
	for (const { people, ...organisation } of demoOrganisations) {
		const [founder, ...others] = people;
		const person = await ensurePerson(db, founder, password);
		const own = await membershipsOf(person, db);
		const membership =
			own.find((one) => one.organisationName === organisation.name) ??
			(await createOrganisation(person, organisation, db));
		loaded.memberships[organisation.name] = membership;
		loaded.signIns.push({ ...founder, password, organisation: organisation.name });
		const members = await listMembers(membership, db);
		for (const other of others) {
			const colleague = await ensurePerson(db, other, password);
			if (!members.some(({ userId }) => userId === colleague.id)) await addMember(membership, other, db);
			colleagues.push({ ...other, password, organisation: organisation.name });
		}
	}
	loaded.signIns.push(...colleagues);
	await loadDemoWork(loaded.memberships, db);
	return loaded;
}
