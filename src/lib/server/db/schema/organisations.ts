import { boolean, index, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts';
import { instant } from './columns';

export const organisations = pgTable('organisations', {
	id: uuid('id').primaryKey().defaultRandom(),
	name: text('name').notNull(),
	/** Lines of the postal address, as the letterhead prints them. */
	address: text('address').array().notNull().default([]),
	registrationLine: text('registration_line'),
	/** Letters that start a report's number: "TB" in TB-0412. */
	numberPrefix: text('number_prefix').notNull(),
	/** May an author approve a report of their own? The report then says that it was not independently reviewed. */
	selfApproval: boolean('self_approval').notNull().default(true),
	createdAt: instant('created_at').notNull().defaultNow()
});

export const roles = ['owner', 'billing', 'author', 'reviewer', 'reader'] as const;

export const memberships = pgTable(
	'memberships',
	{
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		userId: uuid('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		roles: text('roles', { enum: roles }).array().notNull(),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(t) => [primaryKey({ columns: [t.organisationId, t.userId] }), index('memberships_user').on(t.userId)]
);

/** Who did what, append only. `detail` never holds a secret or a document's text. */
export const auditEvents = pgTable(
	'audit_events',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id').references(() => organisations.id, { onDelete: 'cascade' }),
		userId: uuid('user_id').references(() => users.id, { onDelete: 'set null' }),
		action: text('action').notNull(),
		subject: text('subject'),
		detail: jsonb('detail'),
		at: instant('at').notNull().defaultNow()
	},
	(t) => [index('audit_organisation').on(t.organisationId, t.at)]
);
