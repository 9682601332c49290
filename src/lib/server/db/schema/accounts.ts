import { sql } from 'drizzle-orm';
import { index, integer, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { instant } from './columns';

/* Property names of users, accounts, sessions and verificationTokens are those the Auth.js adapter asks for. */

export const users = pgTable(
	'users',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		name: text('name').notNull(),
		email: text('email').notNull(),
		emailVerified: instant('email_verified'),
		image: text('image'),
		createdAt: instant('created_at').notNull().defaultNow(),
		/** Set for the demo's people, so that a start can tell its own rows from anybody else's. */
		demo: text('demo')
	},
	(t) => [uniqueIndex('users_email_lower').on(sql`lower(${t.email})`)]
);

export const accounts = pgTable(
	'accounts',
	{
		userId: uuid('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		type: text('type').notNull(),
		provider: text('provider').notNull(),
		providerAccountId: text('provider_account_id').notNull(),
		refresh_token: text('refresh_token'),
		access_token: text('access_token'),
		expires_at: integer('expires_at'),
		token_type: text('token_type'),
		scope: text('scope'),
		id_token: text('id_token'),
		session_state: text('session_state')
	},
	(t) => [primaryKey({ columns: [t.provider, t.providerAccountId] })]
);

export const sessions = pgTable(
	'sessions',
	{
		/** SHA-256 of the cookie's token: a copy of this table opens no session. */
		sessionToken: text('session_token').primaryKey(),
		userId: uuid('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		expires: instant('expires').notNull(),
		createdAt: instant('created_at').notNull().defaultNow(),
		lastSeenAt: instant('last_seen_at').notNull().defaultNow(),
		userAgent: text('user_agent')
	},
	(t) => [index('sessions_user').on(t.userId)]
);

export const verificationTokens = pgTable(
	'verification_tokens',
	{
		identifier: text('identifier').notNull(),
		token: text('token').notNull(),
		expires: instant('expires').notNull()
	},
	(t) => [primaryKey({ columns: [t.identifier, t.token] })]
);

/** Apart from `users`, so that no session callback can leak the hash with the user row. */
export const passwords = pgTable('passwords', {
	userId: uuid('user_id')
		.primaryKey()
		.references(() => users.id, { onDelete: 'cascade' }),
	hash: text('hash').notNull(),
	changedAt: instant('changed_at').notNull().defaultNow()
});

/** Links sent by mail: confirm an address, choose a new password. Only the token's hash is kept; used once. */
export const mailTokens = pgTable(
	'mail_tokens',
	{
		tokenHash: text('token_hash').primaryKey(),
		userId: uuid('user_id')
			.notNull()
			.references(() => users.id, { onDelete: 'cascade' }),
		purpose: text('purpose', { enum: ['confirm-address', 'reset-password'] }).notNull(),
		expires: instant('expires').notNull(),
		usedAt: instant('used_at')
	},
	(t) => [index('mail_tokens_user').on(t.userId)]
);

/** Counters of the rate limiter: one row per key and window. */
export const rateWindows = pgTable(
	'rate_windows',
	{
		key: text('key').notNull(),
		windowStart: instant('window_start').notNull(),
		count: integer('count').notNull()
	},
	(t) => [primaryKey({ columns: [t.key, t.windowStart] })]
);
