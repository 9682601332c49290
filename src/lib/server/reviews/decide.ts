import type { Membership } from '../access/membership';
import { database, type Database } from '../db';

/**
 * Approves the report as the page showed it. Said twice by the same person it happens once.
 * @throws InvalidInputError (`statement`), ConflictError where the report changed since the page was shown or is not in
 * review, ForbiddenError for one who wrote it.
 */
export async function approveReport(
	_membership: Membership | null,
	_reportId: string,
	_given: { statement: string; digest: string },
	_db: Database = database()
): Promise<void> {
	throw new Error('Being built.');
}

/** Returns the report with reasons. @throws InvalidInputError (`reasons`), ConflictError */
export async function returnReport(
	_membership: Membership | null,
	_reportId: string,
	_given: { reasons: string },
	_db: Database = database()
): Promise<void> {
	throw new Error('Being built.');
}
