import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import type { ReviewerChoice, ReviewState } from './types';

/** Where a report's review stands, for its page. */
export async function reviewOf(
	_membership: Membership | null,
	_reportId: string,
	_db: Queryable = database()
): Promise<ReviewState> {
	throw new Error('Being built.');
}

/** Everybody who reviews in this organisation or is a guest of the dossier; those who cannot be asked say why. */
export async function reviewersFor(
	_membership: Membership | null,
	_reportId: string,
	_db: Queryable = database()
): Promise<ReviewerChoice[]> {
	throw new Error('Being built.');
}
