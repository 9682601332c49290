import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import type { RecomputationView } from './types';

/** Computes every record of the report again and compares it with what is stored. */
export async function recomputeReport(
	_membership: Membership | null,
	_reportId: string,
	_db: Database = database()
): Promise<RecomputationView> {
	throw new Error('Being built.');
}
