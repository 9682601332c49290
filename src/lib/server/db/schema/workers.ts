import { integer, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { instant } from './columns';

/** One row per worker process that is alive or died lately; `seenAt` is its heartbeat, by the database's clock. */
export const workers = pgTable('workers', {
	id: uuid('id').primaryKey(),
	host: text('host').notNull(),
	processId: integer('process_id').notNull(),
	startedAt: instant('started_at').notNull().defaultNow(),
	seenAt: instant('seen_at').notNull().defaultNow()
});
