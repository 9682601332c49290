import { index, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts';
import { instant } from './columns';
import { organisations } from './organisations';

/** Mails that follow from a change, written in its transaction and sent by a worker: each once. */
export const notices = pgTable(
	'notices',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		kind: text('kind', {
			enum: ['review-asked', 'review-returned', 'review-approved', 'approval-void', 'report-issued']
		}).notNull(),
		/** What makes it one: kind, subject and person. */
		key: text('key').notNull(),
		userId: uuid('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		/** Ids only: what is written is read when it is sent. */
		subject: jsonb('subject').$type<{ reportId: string; reviewId?: string; issueId?: string }>().notNull(),
		writtenAt: instant('written_at').notNull().defaultNow(),
		sentAt: instant('sent_at'),
		/** Why it was not sent: the person has no access any more, or the mail server refused it. */
		problem: text('problem')
	},
	(t) => [
		uniqueIndex('notices_key').on(t.key),
		index('notices_organisation').on(t.organisationId, t.writtenAt)
	]
);
