import { index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { CalculationDraft } from '../../../calculation/draft';
import type { ComputeRequest, ComputeResult } from '../../../calculation/types';
import { users } from './accounts';
import { bytea, instant } from './columns';
import { organisations } from './organisations';

export const dossiers = pgTable(
	'dossiers',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		title: text('title').notNull(),
		/** The question as the client put it. */
		question: text('question').notNull().default(''),
		client: text('client').notNull().default(''),
		clientContact: text('client_contact').notNull().default(''),
		scope: text('scope').notNull().default(''),
		/** Who may rely on the report. */
		reliance: text('reliance').notNull().default(''),
		projectNumber: text('project_number').notNull().default(''),
		orderNumber: text('order_number').notNull().default(''),
		/** Counts saves of the fields above; a save states the version it started from. */
		version: integer('version').notNull().default(1),
		createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
		createdAt: instant('created_at').notNull().defaultNow(),
		updatedAt: instant('updated_at').notNull().defaultNow(),
		/** Deleted things stay for thirty days, so that a deletion can be undone. */
		deletedAt: instant('deleted_at')
	},
	(t) => [index('dossiers_organisation').on(t.organisationId, t.updatedAt)]
);

export const calculations = pgTable(
	'calculations',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		dossierId: uuid('dossier_id')
			.notNull()
			.references(() => dossiers.id, { onDelete: 'cascade' }),
		title: text('title').notNull(),
		/** Everything typed, as typed. */
		draft: jsonb('draft').$type<CalculationDraft>().notNull(),
		/** Counts saves; a save states the version it started from, so that two tabs cannot overwrite each other unseen. */
		version: integer('version').notNull().default(1),
		createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
		createdAt: instant('created_at').notNull().defaultNow(),
		updatedAt: instant('updated_at').notNull().defaultNow(),
		deletedAt: instant('deleted_at')
	},
	(t) => [
		index('calculations_dossier').on(t.dossierId),
		index('calculations_organisation').on(t.organisationId, t.updatedAt)
	]
);

export const calculationVersions = pgTable(
	'calculation_versions',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		calculationId: uuid('calculation_id')
			.notNull()
			.references(() => calculations.id, { onDelete: 'cascade' }),
		version: integer('version').notNull(),
		draft: jsonb('draft').$type<CalculationDraft>().notNull(),
		savedBy: uuid('saved_by').references(() => users.id, { onDelete: 'set null' }),
		savedAt: instant('saved_at').notNull().defaultNow()
	},
	(t) => [uniqueIndex('calculation_versions_number').on(t.calculationId, t.version)]
);

export const runStates = ['queued', 'running', 'done', 'failed'] as const;

/** A run is written once: request at start, result at the end. It never changes after `done`. */
export const runs = pgTable(
	'runs',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		calculationId: uuid('calculation_id')
			.notNull()
			.references(() => calculations.id, { onDelete: 'cascade' }),
		/** The draft that the request was made from: sources, notes and evidence belong to the run. */
		draft: jsonb('draft').$type<CalculationDraft>().notNull(),
		request: jsonb('request').$type<ComputeRequest>().notNull(),
		/** Canonical JSON of `{request, result}`, kept as text: jsonb would lose the order and form that are hashed. */
		record: text('record'),
		result: jsonb('result').$type<ComputeResult>(),
		recordHash: text('record_hash'),
		state: text('state', { enum: runStates }).notNull(),
		/** 0 to 1, written by the worker. */
		progress: integer('progress_percent').notNull().default(0),
		problem: text('problem'),
		engineVersion: text('engine_version'),
		nodeVersion: text('node_version'),
		createdBy: uuid('created_by').references(() => users.id, { onDelete: 'set null' }),
		createdAt: instant('created_at').notNull().defaultNow(),
		finishedAt: instant('finished_at')
	},
	(t) => [index('runs_calculation').on(t.calculationId, t.createdAt)]
);

export const evidence = pgTable(
	'evidence',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		dossierId: uuid('dossier_id')
			.notNull()
			.references(() => dossiers.id, { onDelete: 'cascade' }),
		/** As uploaded, for reading only; never part of a path. */
		fileName: text('file_name').notNull(),
		mediaType: text('media_type', { enum: ['application/pdf', 'image/png'] }).notNull(),
		size: integer('size').notNull(),
		sha256: text('sha256').notNull(),
		content: bytea('content').notNull(),
		uploadedBy: uuid('uploaded_by').references(() => users.id, { onDelete: 'set null' }),
		uploadedAt: instant('uploaded_at').notNull().defaultNow(),
		deletedAt: instant('deleted_at')
	},
	(t) => [index('evidence_dossier').on(t.dossierId)]
);
