import { sql } from 'drizzle-orm';
import { boolean, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { users } from './accounts';
import { instant } from './columns';
import { organisations } from './organisations';
import { reports } from './reports';

/**
 * How one round of review ended. `recalled`: the author took it back; `void`: it was approved, and something that the
 * approval covered changed afterwards.
 */
export const reviewStates = ['open', 'returned', 'approved', 'recalled', 'void'] as const;

/** One round: a report is sent, read by somebody else, and returned or approved. */
export const reviews = pgTable(
	'reviews',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		reportId: uuid('report_id')
			.notNull()
			.references(() => reports.id, { onDelete: 'cascade' }),
		revision: integer('revision').notNull(),
		/** 1 for the first time that this revision was sent. */
		round: integer('round').notNull(),
		state: text('state', { enum: reviewStates }).notNull().default('open'),
		sentBy: uuid('sent_by').references(() => users.id, { onDelete: 'set null' }),
		sentAt: instant('sent_at').notNull().defaultNow(),
		/** What the author asks to look at. */
		note: text('note').notNull().default(''),
		/** Who was asked and gets the mails; any reviewer who may see the report may decide. */
		askedOf: uuid('asked_of').array().notNull().default([]),
		/** The report as it stood when it was sent, then as it was decided on: what the next round is compared with. */
		model: jsonb('model').notNull(),
		/** SHA-256 over everything that an approval covers, in canonical JSON. */
		digest: text('digest').notNull(),
		decidedBy: uuid('decided_by').references(() => users.id, { onDelete: 'set null' }),
		decidedAt: instant('decided_at'),
		/** The statement of an approval or the reasons of a return. */
		statement: text('statement').notNull().default(''),
		/** False only for an approval by one who wrote the report, where the organisation's rules allow that. */
		independent: boolean('independent').notNull().default(true),
		/** Why it is void, in plain words. */
		voidReason: text('void_reason')
	},
	(t) => [
		uniqueIndex('reviews_round').on(t.reportId, t.revision, t.round),
		uniqueIndex('reviews_open')
			.on(t.reportId)
			.where(sql`${t.state} = 'open'`),
		index('reviews_organisation').on(t.organisationId, t.sentAt)
	]
);

/** A remark on a line of the report or on an assumption; an answer names the remark that it answers. */
export const reviewComments = pgTable(
	'review_comments',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		reportId: uuid('report_id')
			.notNull()
			.references(() => reports.id, { onDelete: 'cascade' }),
		revision: integer('revision').notNull(),
		/** Round during which it was written; 0 before the first. */
		round: integer('round').notNull(),
		/** Where, as duties name places: "text.answer", "run:ID/input:ID", "run:ID/output:ID", "report.title". */
		place: text('place').notNull(),
		/** The line as it read then. */
		quoted: text('quoted').notNull().default(''),
		body: text('body').notNull(),
		answers: uuid('answers'),
		writtenBy: uuid('written_by').references(() => users.id, { onDelete: 'set null' }),
		writtenAt: instant('written_at').notNull().defaultNow(),
		settledAt: instant('settled_at'),
		settledBy: uuid('settled_by').references(() => users.id, { onDelete: 'set null' })
	},
	(t) => [index('review_comments_report').on(t.reportId, t.writtenAt)]
);

/** A reviewer's own figure by another route, kept and printed beside the result. */
export const reviewerFigures = pgTable(
	'reviewer_figures',
	{
		id: uuid('id').primaryKey().defaultRandom(),
		organisationId: uuid('organisation_id')
			.notNull()
			.references(() => organisations.id, { onDelete: 'cascade' }),
		reportId: uuid('report_id')
			.notNull()
			.references(() => reports.id, { onDelete: 'cascade' }),
		revision: integer('revision').notNull(),
		runId: uuid('run_id').notNull(),
		/** Output of the method that it stands beside. */
		output: text('output').notNull(),
		/** What it is: a value, or a bound that the result must not pass. */
		kind: text('kind', { enum: ['value', 'upper-bound', 'lower-bound'] }).notNull(),
		/** As typed, and its unit. */
		value: text('value').notNull(),
		unit: text('unit').notNull(),
		/** Give or take, as typed; empty where none was stated. */
		giveOrTake: text('give_or_take').notNull().default(''),
		/** What it averages, in words: "the whole sheet at noon". Never assumed to be what the result averages. */
		averages: text('averages').notNull().default(''),
		/** By which route, in words. */
		route: text('route').notNull(),
		enteredBy: uuid('entered_by').references(() => users.id, { onDelete: 'set null' }),
		enteredAt: instant('entered_at').notNull().defaultNow(),
		/** Taken back by its reviewer; kept, no longer printed. */
		withdrawnAt: instant('withdrawn_at')
	},
	(t) => [index('reviewer_figures_report').on(t.reportId, t.revision)]
);
