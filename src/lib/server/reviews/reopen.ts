import type { Membership } from '../access/membership';
import { database, type Database } from '../db';

/** Makes an approved report a draft again; its approval is void. @throws ConflictError once its issue was asked for. */
export async function reopenReport(
	_membership: Membership | null,
	_reportId: string,
	_db: Database = database()
): Promise<void> {
	throw new Error('Being built.');
}
