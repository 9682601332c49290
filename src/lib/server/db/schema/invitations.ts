import { sql } from 'drizzle-orm';
import { index, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts';
import { instant } from './columns';
import { dossiers } from './dossiers';
import { organisations, roles } from './organisations';

/**
 * An invitation by mail: into the organisation with roles, or as guest reviewer of one dossier. Only the hash of its
 * link is kept. It is open while it is neither accepted nor revoked nor expired.
 */
export const invitations = pgTable(
	'invitations',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: ['member', 'guest'] }).notNull(),
		/** The address that it was sent to, as typed; compared in lower case. */
		email: text('email').notNull(),
		/** Of a member; empty for a guest. */
		roles: text('roles', { enum: roles }).array().notNull().default([]),
		/** Of a guest. */
		dossierId: uuid('dossier_id').references(() => dossiers.id, { onDelete: 'cascade' }),
		/** A new one with each sending: an older link no longer works. */
		tokenHash: text('token_hash').notNull(),
		invitedBy: uuid('invited_by').references(() => users.id, { onDelete: 'set null' }),
		createdAt: instant('created_at').notNull().defaultNow(),
		sentAt: instant('sent_at').notNull().defaultNow(),
		expiresAt: instant('expires_at').notNull(),
		acceptedAt: instant('accepted_at'),
		acceptedBy: uuid('accepted_by').references(() => users.id, { onDelete: 'set null' }),
		revokedAt: instant('revoked_at')
	},
	(t) => [
		uniqueIndex('invitations_token').on(t.tokenHash),
		index('invitations_organisation').on(t.organisationId, t.createdAt),
		// One open invitation for one address and purpose: a second click sends the same one again.
		uniqueIndex('invitations_open')
			.on(t.organisationId, sql`lower(${t.email})`, sql`coalesce(${t.dossierId}::text, '')`)
			.where(sql`${t.acceptedAt} is null and ${t.revokedAt} is null`)
	]
);

/** A person who is no member and may read and review one dossier; takes no seat. */
export const dossierGuests = pgTable(
	'dossier_guests',
	{
		dossierId: uuid('dossier_id')
			.notNull()
			.references(() => dossiers.id, { onDelete: 'cascade' }),
		userId: uuid('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		invitedBy: uuid('invited_by').references(() => users.id, { onDelete: 'set null' }),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(t) => [primaryKey({ columns: [t.dossierId, t.userId] }), index('dossier_guests_user').on(t.userId)]
);
