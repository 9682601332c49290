import { eq } from 'drizzle-orm';
import type { Queryable } from '../db';
import { organisations } from '../db/schema';

/** Whether the organisation lets authors approve, and issue, what they wrote. */
export async function selfApprovalAllowed(organisationId: string, db: Queryable): Promise<boolean> {
	const [row] = await db
		.select({ selfApproval: organisations.selfApproval })
		.from(organisations)
		.where(eq(organisations.id, organisationId));
	return row?.selfApproval === true;
}

export const ownWorkRefusal =
	'You had a hand in this report or its calculations, and your organisation wants a second reader: somebody else has to decide.';
