import { index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { ReportText } from '../../../report/text';
import { users } from './accounts';
import { bytea, instant } from './columns';
import { dossiers } from './dossiers';
import { organisations } from './organisations';

/** Document control's own states. */
export const reportStates = [
	'draft',
	'in-review',
	'returned',
	'approved',
	'issued',
	'superseded',
	'withdrawn'
] as const;

/** One number with its revisions; a revision is a row of its own. */
export const reports = pgTable(
	'reports',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		dossierId: uuid('dossier_id')
			.notNull()
			.references(() => dossiers.id, { onDelete: 'cascade' }),
		/** "TB-0412", unique in the organisation. */
		number: text('number').notNull(),
		revision: integer('revision').notNull().default(1),
		template: text('template').notNull(),
		title: text('title').notNull(),
		text: jsonb('text').$type<ReportText>().notNull(),
		/** The runs it reports, in order. */
		runIds: uuid('run_ids').array().notNull().default([]),
		state: text('state', { enum: reportStates }).notNull().default('draft'),
		version: integer('version').notNull().default(1),
		createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
		/** Everybody who saved it: none of them can be its independent reviewer. */
		writers: uuid('writers').array().notNull().default([]),
		createdAt: instant('created_at').notNull().defaultNow(),
		updatedAt: instant('updated_at').notNull().defaultNow(),
		deletedAt: instant('deleted_at')
	},
	(t) => [
		uniqueIndex('reports_number').on(t.organisationId, t.number, t.revision),
		index('reports_organisation').on(t.organisationId, t.updatedAt),
		index('reports_dossier').on(t.dossierId)
	]
);

export const issueStates = ['queued', 'rendering', 'signing', 'done', 'failed'] as const;

/** The issue of one revision: at most one, whatever is clicked or retried. The signed bytes are kept for ever. */
export const issues = pgTable(
	'issues',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		reportId: uuid('report_id')
			.notNull()
			.references(() => reports.id, { onDelete: 'cascade' }),
		revision: integer('revision').notNull(),
		state: text('state', { enum: issueStates }).notNull().default('queued'),
		/** Raised each time a worker takes the job; a worker may finish only the attempt that it took (fencing). */
		attempt: integer('attempt').notNull().default(0),
		problem: text('problem'),
		/** What the requester can do about a failure: `no-exports` is mended by paying, anything else by trying again. */
		problemKind: text('problem_kind', { enum: ['no-exports', 'fault'] }),
		/** Short code printed on page one, such as 8KQ2-7MTR. */
		code: text('code').notNull(),
		/** What was rendered, frozen when the issue was asked for. */
		model: jsonb('model').notNull(),
		pdf: bytea('pdf'),
		sha256: text('sha256'),
		size: integer('size'),
		certificateId: uuid('certificate_id'),
		requestedBy: uuid('requested_by').references(() => users.id, { onDelete: 'set null' }),
		requestedAt: instant('requested_at').notNull().defaultNow(),
		issuedAt: instant('issued_at')
	},
	(t) => [
		uniqueIndex('issues_report_revision').on(t.reportId, t.revision),
		uniqueIndex('issues_code').on(t.code),
		index('issues_sha256').on(t.sha256)
	]
);

export const previewStates = ['queued', 'rendering', 'done', 'failed'] as const;

/** A watermarked, unsigned rendering of a draft, made by a worker; kept for a day. */
export const previews = pgTable(
	'previews',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		reportId: uuid('report_id')
			.notNull()
			.references(() => reports.id, { onDelete: 'cascade' }),
		/** The report's version that it shows. */
		version: integer('version').notNull(),
		state: text('state', { enum: previewStates }).notNull().default('queued'),
		problem: text('problem'),
		model: jsonb('model').notNull(),
		pdf: bytea('pdf'),
		requestedAt: instant('requested_at').notNull().defaultNow()
	},
	(t) => [index('previews_report').on(t.reportId, t.requestedAt)]
);

/** Private keys are sealed with a key from the environment before they come here. */
export const certificates = pgTable(
	'certificates',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		/** Null for the service's own authority. */
		organisationId: uuid('organisation_id').references(() => organisations.id, { onDelete: 'cascade' }),
		kind: text('kind', { enum: ['root', 'issuing', 'organisation'] }).notNull(),
		subject: text('subject').notNull(),
		serial: text('serial').notNull(),
		certificatePem: text('certificate_pem').notNull(),
		/** AES-256-GCM: key id, nonce, ciphertext and tag, as one text. */
		sealedKey: text('sealed_key').notNull(),
		fingerprint: text('fingerprint').notNull(),
		notBefore: instant('not_before').notNull(),
		notAfter: instant('not_after').notNull(),
		revokedAt: instant('revoked_at'),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(t) => [
		index('certificates_organisation').on(t.organisationId, t.kind),
		uniqueIndex('certificates_serial').on(t.serial)
	]
);
