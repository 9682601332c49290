import type { z } from 'zod';
import type { newOrganisationSchema } from '../../schemas/organisations';
import { recordAudit } from '../access/audit';
import { limit } from '../access/limit';
import type { Membership, MemberRole } from '../access/membership';
import type { Person } from '../accounts/person';
import { grantTrial } from '../billing/ledger';
import { database, type Database } from '../db';
import { memberships, organisations } from '../db/schema';

/** What whoever founds an organisation may do in it: everything. */
export const founderRoles: readonly MemberRole[] = ['owner', 'author', 'reviewer', 'billing'];

/** @throws TooManyRequestsError after ten new organisations in a day */
export async function createOrganisation(
	person: Person,
	input: z.infer<typeof newOrganisationSchema>,
	db: Database = database()
): Promise<Membership> {
	await limit(`new-organisation:${person.id}`, 10, 86_400, db);
	return db.transaction(async (tx) => {
		const [row] = await tx
			.insert(organisations)
			.values({ name: input.name, address: input.address, numberPrefix: input.numberPrefix })
			.returning({ id: organisations.id });
		if (row === undefined) throw new Error('The organisation was not created.');
		const membership: Membership = {
			organisationId: row.id,
			organisationName: input.name,
			userId: person.id,
			roles: founderRoles,
			onlyDossiers: null
		};
		await tx
			.insert(memberships)
			.values({ organisationId: row.id, userId: person.id, roles: [...founderRoles] });
		await grantTrial(tx, row.id, person.id);
		await recordAudit(tx, membership, 'organisation.create', row.id);
		return membership;
	});
}
