import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import type { ReviewView } from './types';

/** Everything that the review page shows. @throws InvalidInputError where the report has no result yet. */
export async function reviewView(
	_membership: Membership | null,
	_reportId: string,
	_db: Queryable = database()
): Promise<ReviewView> {
	throw new Error('Being built.');
}
