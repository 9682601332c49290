import type { Membership } from '../access/membership';
import { database, type Database } from '../db';

export interface Sending {
	/** Ids of the people who are asked: see `reviewersFor`. */
	reviewers: string[];
	note: string;
	/** `version` that the page showed. */
	baseVersion: number;
}

/**
 * Sends a draft or returned report for review.
 * @returns the round's id
 * @throws InvalidInputError with faults by field (`reviewers`, `note`) or place of an unmet duty, ConflictError where
 * it was saved since or is in another state.
 */
export async function sendForReview(
	_membership: Membership | null,
	_reportId: string,
	_given: Sending,
	_db: Database = database()
): Promise<string> {
	throw new Error('Being built.');
}

/** Takes a report back from review: it is a draft again. Said twice it happens once. */
export async function recallReview(
	_membership: Membership | null,
	_reportId: string,
	_db: Database = database()
): Promise<void> {
	throw new Error('Being built.');
}
