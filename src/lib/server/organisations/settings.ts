import { eq } from 'drizzle-orm';
import type { z } from 'zod';
import type { organisationSchema } from '../../schemas/organisations';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { database, type Database, type Queryable } from '../db';
import { organisations } from '../db/schema';
import { voidStaleApprovals } from '../reviews/approval';

export interface OrganisationSettings {
	id: string;
	name: string;
	/** Lines of the postal address. */
	address: string[];
	registrationLine: string;
	numberPrefix: string;
	selfApproval: boolean;
}

/** @throws NotFoundError */
export async function readOrganisation(
	membership: Membership | null,
	db: Queryable = database()
): Promise<OrganisationSettings> {
	requireAction(membership, 'organisation.read');
	const [row] = await db.select().from(organisations).where(eq(organisations.id, membership.organisationId));
	if (row === undefined) throw new NotFoundError('organisation');
	return {
		id: row.id,
		name: row.name,
		address: row.address,
		registrationLine: row.registrationLine ?? '',
		numberPrefix: row.numberPrefix,
		selfApproval: row.selfApproval
	};
}

/** Changes letterhead and policy; reports that are issued already keep what they print. */
export async function updateOrganisation(
	membership: Membership | null,
	input: z.infer<typeof organisationSchema>,
	db: Database = database()
): Promise<void> {
	requireAction(membership, 'organisation.manage');
	await db.transaction(async (tx) => {
		await tx
			.update(organisations)
			.set({
				name: input.name,
				address: input.address,
				registrationLine: input.registrationLine === '' ? null : input.registrationLine,
				numberPrefix: input.numberPrefix,
				selfApproval: input.selfApproval
			})
			.where(eq(organisations.id, membership.organisationId));
		await recordAudit(tx, membership, 'organisation.update', membership.organisationId, {
			selfApproval: input.selfApproval
		});
		await voidStaleApprovals(tx, membership, 'organisation', 'The organisation’s letterhead was changed');
	});
}
