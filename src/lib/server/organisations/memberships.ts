import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Membership } from '../access/membership';
import type { Person } from '../accounts/person';
import { database, type Queryable } from '../db';
import { dossierGuests, dossiers, memberships, organisations } from '../db/schema';

async function asMember(person: Pick<Person, 'id'>, db: Queryable): Promise<Membership[]> {
	const rows = await db
		.select({
			organisationId: organisations.id,
			organisationName: organisations.name,
			roles: memberships.roles
		})
		.from(memberships)
		.innerJoin(organisations, eq(organisations.id, memberships.organisationId))
		.where(eq(memberships.userId, person.id))
		.orderBy(asc(memberships.createdAt), asc(organisations.name));
	return rows.map((row) => ({ ...row, userId: person.id, onlyDossiers: null }));
}

/** One membership an organisation, with the dossiers that the person was invited to. */
async function asGuest(person: Pick<Person, 'id'>, db: Queryable): Promise<Membership[]> {
	const rows = await db
		.select({
			organisationId: organisations.id,
			organisationName: organisations.name,
			dossierId: dossierGuests.dossierId
		})
		.from(dossierGuests)
		.innerJoin(organisations, eq(organisations.id, dossierGuests.organisationId))
		.innerJoin(dossiers, and(eq(dossiers.id, dossierGuests.dossierId), isNull(dossiers.deletedAt)))
		.where(eq(dossierGuests.userId, person.id))
		.orderBy(asc(dossierGuests.createdAt), asc(organisations.name));
	const found = new Map<string, Membership>();
	for (const { organisationId, organisationName, dossierId } of rows) {
		const onlyDossiers = [...(found.get(organisationId)?.onlyDossiers ?? []), dossierId];
		found.set(organisationId, {
			organisationId,
			organisationName,
			userId: person.id,
			roles: ['guest'],
			onlyDossiers
		});
	}
	return [...found.values()];
}

/**
 * Every organisation that a person belongs to, the longest-standing first, then those where they are a guest. Who is
 * a member is no guest there as well.
 */
export async function membershipsOf(
	person: Pick<Person, 'id'>,
	db: Queryable = database()
): Promise<Membership[]> {
	const [members, guests] = await Promise.all([asMember(person, db), asGuest(person, db)]);
	const own = new Set(members.map(({ organisationId }) => organisationId));
	return [...members, ...guests.filter(({ organisationId }) => !own.has(organisationId))];
}

/** The person's membership in one organisation as it stands now, or null. */
export async function membershipIn(
	person: Pick<Person, 'id'>,
	organisationId: string,
	db: Queryable = database()
): Promise<Membership | null> {
	const all = await membershipsOf(person, db);
	return all.find((one) => one.organisationId === organisationId) ?? null;
}

/** The organisation that a person acts in: the one they chose, if they still belong to it, or their first. */
export async function currentMembership(
	person: Person,
	chosenId: string | null,
	db: Queryable = database()
): Promise<Membership | null> {
	const all = await membershipsOf(person, db);
	return all.find(({ organisationId }) => organisationId === chosenId) ?? all[0] ?? null;
}
