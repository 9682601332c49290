import { randomUUID } from 'node:crypto';
import type { Membership, MemberRole } from '../access/membership';
import type { Database } from '../db';
import { memberships, organisations, users } from '../db/schema';

/** A person of the given roles in a new organisation, or in the one of `beside`. */
export async function member(db: Database, roles: MemberRole[], beside?: Membership): Promise<Membership> {
	const mark = randomUUID().slice(0, 8);
	let organisation = beside && { id: beside.organisationId, name: beside.organisationName };
	if (organisation === undefined) {
		[organisation] = await db
			.insert(organisations)
			.values({ name: `Organisation ${mark}`, numberPrefix: 'TB' })
			.returning({ id: organisations.id, name: organisations.name });
	}
	const [user] = await db
		.insert(users)
		.values({ name: `Person ${mark}`, email: `${mark}@people.example` })
		.returning({ id: users.id });
	if (organisation === undefined || user === undefined) throw new Error('The test database stored no row.');
	await db.insert(memberships).values({ organisationId: organisation.id, userId: user.id, roles });
	return {
		organisationId: organisation.id,
		organisationName: organisation.name,
		userId: user.id,
		roles,
		onlyDossiers: null
	};
}
