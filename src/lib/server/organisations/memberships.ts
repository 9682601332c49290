import { and, asc, eq } from 'drizzle-orm';
import type { Membership } from '../access/membership';
import type { Person } from '../accounts/person';
import { database, type Queryable } from '../db';
import { memberships, organisations } from '../db/schema';

/** Every organisation that a person belongs to, the longest-standing first. */
export async function membershipsOf(person: Person, db: Queryable = database()): Promise<Membership[]> {
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
	return rows.map((row) => ({ ...row, userId: person.id }));
}

/** The person's membership in one organisation as it stands now, or null. */
export async function membershipIn(
	person: Person,
	organisationId: string,
	db: Queryable = database()
): Promise<Membership | null> {
	const [row] = await db
		.select({ organisationName: organisations.name, roles: memberships.roles })
		.from(memberships)
		.innerJoin(organisations, eq(organisations.id, memberships.organisationId))
		.where(and(eq(memberships.userId, person.id), eq(memberships.organisationId, organisationId)));
	return row === undefined ? null : { organisationId, userId: person.id, ...row };
}

/** The organisation that a person acts in: the one they chose, if they still belong to it, or their first. */
export async function currentMembership(
	person: Person,
	chosenId: string | null,
	db: Queryable = database()
): Promise<Membership | null> {
	const chosen = chosenId === null ? null : await membershipIn(person, chosenId, db);
	return chosen ?? (await membershipsOf(person, db))[0] ?? null;
}
