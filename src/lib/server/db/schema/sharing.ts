import { index, integer, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts';
import { instant } from './columns';
import { organisations } from './organisations';
import { issues, reports } from './reports';

/** A link by which a recipient without an account reads one issued report. Only the hash of its token is kept. */
export const shareLinks = pgTable(
	'share_links',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		reportId: uuid('report_id')
			.notNull()
			.references(() => reports.id, { onDelete: 'cascade' }),
		/** The one issue that it shows, and no other revision. */
		issueId: uuid('issue_id')
			.notNull()
			.references(() => issues.id, { onDelete: 'cascade' }),
		tokenHash: text('token_hash').notNull(),
		/** Whom it was made for, in the author's words. */
		recipient: text('recipient').notNull().default(''),
		/** Null where it does not run out. */
		expiresAt: instant('expires_at'),
		revokedAt: instant('revoked_at'),
		createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
		createdAt: instant('created_at').notNull().defaultNow(),
		/** Readings are counted, readers are not told apart. */
		openings: integer('openings').notNull().default(0),
		lastOpenedAt: instant('last_opened_at')
	},
	(t) => [uniqueIndex('share_links_token').on(t.tokenHash), index('share_links_report').on(t.reportId)]
);
