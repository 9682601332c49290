import { randomUUID } from 'node:crypto';
import type { Queryable } from '../../db';
import { exportGrants } from '../../db/schema';

/** Exports for tests that are about something else, as a pack without an end. */
export async function giveExports(db: Queryable, organisationId: string, amount: number): Promise<void> {
	const key = `pack:test-${randomUUID()}`;
	await db.insert(exportGrants).values({ organisationId, kind: 'pack', key, amount });
}
