import { and, desc, eq, isNull, sql } from 'drizzle-orm';
import { z } from 'zod';
import { hashToken, newToken } from '../accounts/tokens';
import { recordAudit } from '../access/audit';
import { requireAction } from '../access/can';
import { ConflictError, InvalidInputError, NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import { database, type Database, type Queryable } from '../db';
import { dossiers, issues, reports, shareLinks, users } from '../db/schema';
import { env } from '../env';
import { getReport } from '../reports/load';

/** A link opens for a year at most, or until it is revoked. */
const givenSchema = z.object({
	recipient: z.string().trim().min(1).max(120),
	expiresInDays: z.int().min(1).max(365).nullable()
});

/** Links made in an hour: by one person, and by everybody of an organisation. */
const paceOfPerson = { max: 30, seconds: 3600 };
const paceOfOrganisation = { max: 120, seconds: 3600 };

export interface ShareLinkRequest {
	/** Whom the link is for, in the author's words; the reader never sees it. */
	recipient: string;
	/** Null where it does not run out. */
	expiresInDays: number | null;
}

export type ShareLinkState = 'open' | 'run-out' | 'revoked';

export interface ShareLinkRow {
	id: string;
	recipient: string;
	/** Who made it; null where that account is gone. */
	madeBy: string | null;
	madeAt: Date;
	expiresAt: Date | null;
	revokedAt: Date | null;
	state: ShareLinkState;
	/** Times that the page was opened. Readers are not told apart. */
	openings: number;
	lastOpenedAt: Date | null;
}

/** How a link stands, by the database's clock: those of several web servers may differ. */
export const stateOfLink = sql<ShareLinkState>`case
	when ${shareLinks.revokedAt} is not null then 'revoked'
	when ${shareLinks.expiresAt} <= now() then 'run-out'
	else 'open' end`;

/** The signed issue of a report that may be shared. @throws ConflictError for any other report. */
async function issueToShare(membership: Membership, reportId: string, db: Queryable): Promise<string> {
	const report = await getReport(membership, reportId, db);
	const [issue] = await db
		.select({ id: issues.id })
		.from(issues)
		.where(
			and(
				eq(issues.reportId, report.id),
				eq(issues.revision, report.revision),
				eq(issues.organisationId, membership.organisationId),
				eq(issues.state, 'done')
			)
		);
	if (report.state !== 'issued' || issue === undefined) {
		const state = report.state === 'in-review' ? 'in review' : report.state;
		throw new ConflictError(
			`Report ${report.number} is ${state === 'issued' ? 'not signed yet' : state}: a link can be made to an issued report only.`
		);
	}
	return issue.id;
}

/**
 * Makes a link by which somebody without an account reads one issued report.
 * @returns the link's id and its address. The address is told this once: only the digest of its token is kept.
 * @throws ConflictError unless the report is issued, InvalidInputError, TooManyRequestsError.
 */
export async function createShareLink(
	membership: Membership | null,
	reportId: string,
	given: ShareLinkRequest,
	db: Database = database()
): Promise<{ id: string; address: string }> {
	requireAction(membership, 'report.share');
	await limit(`share-link:${membership.userId}`, paceOfPerson.max, paceOfPerson.seconds, db);
	await limit(
		`share-link-of:${membership.organisationId}`,
		paceOfOrganisation.max,
		paceOfOrganisation.seconds,
		db
	);
	const parsed = givenSchema.safeParse(given);
	if (!parsed.success) throw new InvalidInputError('Say whom the link is for, and when it runs out.');
	const { recipient, expiresInDays } = parsed.data;
	const token = newToken();
	const id = await db.transaction(async (tx) => {
		const issueId = await issueToShare(membership, reportId, tx);
		const [row] = await tx
			.insert(shareLinks)
			.values({
				organisationId: membership.organisationId,
				reportId,
				issueId,
				tokenHash: hashToken(token),
				recipient,
				expiresAt: expiresInDays === null ? null : sql`now() + make_interval(days => ${expiresInDays})`,
				createdBy: membership.userId
			})
			.returning({ id: shareLinks.id });
		if (row === undefined) throw new Error('The database returned no row for a new link.');
		await recordAudit(tx, membership, 'share-link.create', reportId, {
			link: row.id,
			issue: issueId,
			expiresInDays
		});
		return row.id;
	});
	return { id, address: `${env().ORIGIN}/shared/${token}` };
}

/** The links of a report, newest first, those that no longer work included. */
export async function listShareLinks(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<ShareLinkRow[]> {
	const report = await getReport(membership, reportId, db);
	requireAction(membership, 'report.share');
	return db
		.select({
			id: shareLinks.id,
			recipient: shareLinks.recipient,
			madeBy: users.name,
			madeAt: shareLinks.createdAt,
			expiresAt: shareLinks.expiresAt,
			revokedAt: shareLinks.revokedAt,
			state: stateOfLink,
			openings: shareLinks.openings,
			lastOpenedAt: shareLinks.lastOpenedAt
		})
		.from(shareLinks)
		.leftJoin(users, eq(users.id, shareLinks.createdBy))
		.where(and(eq(shareLinks.reportId, report.id), eq(shareLinks.organisationId, membership.organisationId)))
		.orderBy(desc(shareLinks.createdAt), desc(shareLinks.id));
}

/**
 * Takes a link back: from this moment its address shows nothing. Revoked twice it stays revoked since the first time.
 * @returns whom it was for
 */
export async function revokeShareLink(
	membership: Membership | null,
	linkId: string,
	db: Database = database()
): Promise<string> {
	requireAction(membership, 'report.share');
	return db.transaction(async (tx) => {
		const [link] = await tx
			.select({
				reportId: shareLinks.reportId,
				recipient: shareLinks.recipient,
				revokedAt: shareLinks.revokedAt
			})
			.from(shareLinks)
			.innerJoin(reports, eq(reports.id, shareLinks.reportId))
			.innerJoin(dossiers, eq(dossiers.id, reports.dossierId))
			.where(
				and(
					eq(shareLinks.id, linkId),
					eq(shareLinks.organisationId, membership.organisationId),
					inReach(membership, reports.dossierId),
					isNull(reports.deletedAt),
					isNull(dossiers.deletedAt)
				)
			)
			.for('update', { of: shareLinks });
		if (link === undefined) throw new NotFoundError('link');
		if (link.revokedAt === null) {
			await tx
				.update(shareLinks)
				.set({ revokedAt: sql`now()` })
				.where(eq(shareLinks.id, linkId));
			await recordAudit(tx, membership, 'share-link.revoke', link.reportId, { link: linkId });
		}
		return link.recipient;
	});
}
