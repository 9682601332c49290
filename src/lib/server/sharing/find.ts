import { and, eq, isNull, sql } from 'drizzle-orm';
import { hashToken } from '../accounts/tokens';
import { GoneError, NotFoundError } from '../access/errors';
import { limit, sourceOf } from '../access/limit';
import type { Database } from '../db';
import { dossiers, issues, organisations, reports, shareLinks } from '../db/schema';
import { stateOfLink } from './links';

/** What the reader at one address may open in ten minutes: pages and files together. */
const pace = { max: 240, seconds: 600 };

/** What a link that works leads to: one issue, and no other revision. */
export interface SharedIssue {
	linkId: string;
	issueId: string;
	number: string;
	revision: number;
}

/**
 * What a token leads to. Unknown, malformed and ended ones take the same way through one query, so that the time of
 * the answer tells nothing; an ended one is told apart only for somebody who once held it.
 *
 * @param address of the reader, for the pace
 * @throws NotFoundError for a token that never was, GoneError for one that ran out or was revoked,
 * TooManyRequestsError
 */
export async function findShared(token: string, address: string, db: Database): Promise<SharedIssue> {
	await limit(`shared:${sourceOf(address)}`, pace.max, pace.seconds, db);
	const [row] = await db
		.select({
			linkId: shareLinks.id,
			issueId: issues.id,
			number: reports.number,
			revision: issues.revision,
			state: stateOfLink
		})
		.from(shareLinks)
		.innerJoin(issues, and(eq(issues.id, shareLinks.issueId), eq(issues.reportId, shareLinks.reportId)))
		.innerJoin(reports, eq(reports.id, issues.reportId))
		.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
		.innerJoin(organisations, eq(organisations.id, shareLinks.organisationId))
		.where(
			and(
				eq(shareLinks.tokenHash, hashToken(token)),
				eq(issues.organisationId, shareLinks.organisationId),
				eq(issues.state, 'done'),
				isNull(reports.deletedAt),
				isNull(dossiers.deletedAt)
			)
		);
	if (row === undefined) throw new NotFoundError('page');
	const { state, ...shared } = row;
	if (state !== 'open') {
		throw new GoneError('It has run out or was taken back. Ask whoever sent it to you for a new one.');
	}
	return shared;
}

/** Counts one reading of a link's page. */
export async function countOpening(linkId: string, db: Database): Promise<void> {
	await db
		.update(shareLinks)
		.set({ openings: sql`${shareLinks.openings} + 1`, lastOpenedAt: sql`now()` })
		.where(eq(shareLinks.id, linkId));
}
