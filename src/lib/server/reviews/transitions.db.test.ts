import { eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { issues, reports, reviews } from '../db/schema';
import type { ReportModel } from '$lib/report';
import { deleteReport } from '../reports/change';
import { issueReport } from '../reports/issue';
import { getReport } from '../reports/load';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { addComment } from './comments';
import { approveReport, returnReport } from './decide';
import { enterFigure, withdrawFigure } from './own-figure';
import { reopenReport } from './reopen';
import { recallReview, sendForReview } from './send';
import { reviewersFor, reviewOf } from './state';
import { reviewWorld, type World } from './testing/world';
import { reviewView } from './view';

let db: Database;
let drop: () => Promise<void>;
let world: World;

beforeAll(async () => {
	setTestEnvironment();
	({ db, drop } = await testDatabase());
	world = await reviewWorld(db);
});
afterAll(async () => {
	await drop();
});

const figure = (runId: string) => ({
	runId,
	output: 'solarReflectanceIndex',
	kind: 'upper-bound' as const,
	value: '60',
	unit: '',
	giveOrTake: '',
	averages: 'one tile',
	route: 'A hand estimate from the reflectance alone'
});

type State = 'draft' | 'in-review' | 'returned' | 'approved' | 'being issued' | 'issue failed' | 'issued';

/** Brings a report into a state by the use cases themselves; only the worker's end of an issue is written by hand. */
async function inState(state: State): Promise<string> {
	if (state === 'draft') return world.draft();
	const id = await world.sent();
	if (state === 'in-review') return id;
	if (state === 'returned') {
		await returnReport(world.reviewer, id, { reasons: 'The source is missing.' }, db);
		return id;
	}
	await world.approve(id);
	if (state === 'approved') return id;
	await issueReport(world.author, id, db);
	if (state === 'issue failed') await world.endIssue(id, 'failed');
	if (state === 'issued') await world.endIssue(id, 'done');
	return id;
}

const acts = {
	save: (id: string) => world.save(id, { commentary: 'Changed.' }),
	send: (id: string) => world.send(id),
	recall: (id: string) => recallReview(world.author, id, db),
	approve: (id: string) => world.approve(id, world.guest),
	return: (id: string) => returnReport(world.guest, id, { reasons: 'No.' }, db),
	reopen: (id: string) => reopenReport(world.author, id, db),
	issue: (id: string) => issueReport(world.author, id, db),
	delete: (id: string) => deleteReport(world.author, id, db),
	comment: (id: string) => addComment(world.reviewer, id, { place: 'text.answer', body: 'Why?' }, db),
	figure: (id: string) => enterFigure(world.reviewer, id, figure(world.runId), db)
};
type Act = keyof typeof acts;

/** What each act leads to from each state; a class of error where it is refused. An organisation that wants two readers. */
const same = 'same';
const C = ConflictError;
const table: Record<State, Record<Act, string | typeof ConflictError | typeof ForbiddenError>> = {
	draft: {
		save: same,
		send: 'in-review',
		recall: C,
		approve: C,
		return: C,
		reopen: C,
		issue: ForbiddenError,
		delete: same,
		comment: same,
		figure: C
	},
	'in-review': {
		save: C,
		send: same,
		recall: 'draft',
		approve: 'approved',
		return: 'returned',
		reopen: C,
		issue: C,
		delete: C,
		comment: same,
		figure: same
	},
	returned: {
		save: same,
		send: 'in-review',
		recall: C,
		approve: C,
		return: C,
		reopen: C,
		issue: C,
		delete: same,
		comment: same,
		figure: C
	},
	approved: {
		save: C,
		send: C,
		recall: C,
		approve: C,
		return: C,
		reopen: 'draft',
		issue: same,
		delete: C,
		comment: same,
		figure: C
	},
	'being issued': {
		save: C,
		send: C,
		recall: C,
		approve: C,
		return: C,
		reopen: C,
		issue: same,
		delete: C,
		comment: C,
		figure: C
	},
	'issue failed': {
		save: C,
		send: C,
		recall: C,
		approve: C,
		return: C,
		reopen: 'draft',
		issue: same,
		delete: C,
		comment: same,
		figure: C
	},
	issued: {
		save: C,
		send: C,
		recall: C,
		approve: C,
		return: C,
		reopen: C,
		issue: same,
		delete: C,
		comment: C,
		figure: C
	}
};

const cases = (Object.keys(table) as State[]).flatMap((state) =>
	(Object.keys(acts) as Act[]).map((act) => ({ state, act, outcome: table[state][act] }))
);

describe('every act in every state', () => {
	it.each(cases)('$act of a report that is $state', async ({ state, act, outcome }) => {
		const id = await inState(state);
		const before = await world.stateOf(id);
		if (typeof outcome === 'string') {
			await acts[act](id);
			expect(await world.stateOf(id)).toBe(outcome === same ? before : outcome);
		} else {
			await expect(acts[act](id)).rejects.toThrow(outcome);
			expect(await world.stateOf(id)).toBe(before);
		}
	});
});

describe('sending', () => {
	it('wants a reviewer, and none who had a hand in it', async () => {
		const id = await world.draft();
		await expect(world.send(id, world.author, [])).rejects.toMatchObject({
			fields: { reviewers: expect.stringContaining('at least one') as string }
		});
		for (const who of [world.reader, world.stranger, world.owner]) {
			await expect(world.send(id, world.author, [who.userId])).rejects.toThrow(InvalidInputError);
		}
		await world.save(id, {}, world.both);
		await expect(world.send(id, world.author, [world.both.userId])).rejects.toMatchObject({
			fields: { reviewers: expect.stringContaining('had a hand') as string }
		});
		const choices = await reviewersFor(world.author, id, db);
		expect(choices.map(({ id: who, able, guest }) => [who, able, guest])).toEqual(
			expect.arrayContaining([
				[world.reviewer.userId, true, false],
				[world.both.userId, false, false],
				[world.guest.userId, true, true]
			])
		);
		expect(choices).toHaveLength(3);
		await expect(world.send(id, world.author, [world.guest.userId])).resolves.toEqual(expect.any(String));
	});

	it('is refused with an unmet duty by its place, and from an older version', async () => {
		const id = await world.draft();
		await world.save(id, { question: '' });
		await expect(world.send(id)).rejects.toMatchObject({
			fields: { 'text.question': expect.any(String) as string }
		});
		await expect(
			sendForReview(world.author, id, { reviewers: [world.reviewer.userId], note: '', baseVersion: 1 }, db)
		).rejects.toThrow(ConflictError);
	});

	it('many times at once is one round', async () => {
		const id = await world.draft();
		const rounds = await Promise.all(Array.from({ length: 5 }, () => world.send(id)));
		expect(new Set(rounds).size).toBe(1);
		expect(await db.$count(reviews, eq(reviews.reportId, id))).toBe(1);
	});
});

describe('deciding', () => {
	it('wants a statement, and reasons', async () => {
		const id = await world.sent();
		const { digest } = await reviewView(world.reviewer, id, db);
		await expect(approveReport(world.reviewer, id, { statement: ' ', digest }, db)).rejects.toThrow(
			InvalidInputError
		);
		await expect(returnReport(world.reviewer, id, { reasons: '' }, db)).rejects.toThrow(InvalidInputError);
	});

	it('is refused where the page showed something else', async () => {
		const id = await world.sent();
		const { digest } = await reviewView(world.reviewer, id, db);
		await enterFigure(world.reviewer, id, figure(world.runId), db);
		await expect(approveReport(world.reviewer, id, { statement: 'Fine.', digest }, db)).rejects.toThrow(
			ConflictError
		);
		await world.approve(id);
	});

	it('twice by the same person is one decision, at once or later', async () => {
		const id = await world.sent();
		const { digest } = await reviewView(world.reviewer, id, db);
		const say = (statement: string) => approveReport(world.reviewer, id, { statement, digest }, db);
		await Promise.all([say('First.'), say('First.'), say('First.')]);
		await say('Later.');
		const rounds = await db.select().from(reviews).where(eq(reviews.reportId, id));
		expect(rounds).toHaveLength(1);
		expect(rounds[0]).toMatchObject({ state: 'approved', statement: 'First.', independent: true });
	});

	it('by two at once is the one that came first', async () => {
		const id = await world.sent();
		const { digest } = await reviewView(world.reviewer, id, db);
		const outcomes = await Promise.allSettled([
			approveReport(world.reviewer, id, { statement: 'Yes.', digest }, db),
			returnReport(world.guest, id, { reasons: 'No.' }, db)
		]);
		expect(outcomes.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
		const [lost] = outcomes.filter(({ status }) => status === 'rejected');
		expect(lost).toMatchObject({ reason: expect.any(ConflictError) as ConflictError });
	});

	it('is closed to who wrote it or computed its result, unless the rules say otherwise; then the report says so', async () => {
		const id = await world.draft();
		await world.save(id, { commentary: 'Mine.' }, world.both);
		await world.send(id);
		expect(await reviewView(world.both, id, db)).toMatchObject({ mayDecide: false, ownWork: true });
		await expect(world.approve(id, world.both)).rejects.toThrow(ForbiddenError);
		await expect(returnReport(world.both, id, { reasons: 'x' }, db)).rejects.toThrow(ForbiddenError);
		await world.policy(true);
		expect(await reviewView(world.both, id, db)).toMatchObject({ mayDecide: true, ownWork: true });
		await world.approve(id, world.both);
		await world.policy(false);
		await expect(issueReport(world.author, id, db)).rejects.toThrow(ForbiddenError);
		await world.policy(true);
		await issueReport(world.author, id, db);
		const [issue] = await db.select({ model: issues.model }).from(issues).where(eq(issues.reportId, id));
		expect((issue?.model as ReportModel).review.kind).toBe('approved-by-author');
		await world.policy(false);
	});

	it('freezes who approved, when and with which words; a guest is named as one', async () => {
		const id = await world.sent();
		await world.approve(id, world.guest);
		await issueReport(world.author, id, db);
		const [issue] = await db.select({ model: issues.model }).from(issues).where(eq(issues.reportId, id));
		expect((issue?.model as ReportModel).review).toMatchObject({
			kind: 'reviewed',
			by: { role: 'guest reviewer from outside the organisation' },
			remarks: 'I checked the inputs and computed it again.'
		});
	});
});

describe('a failed issue', () => {
	it('is asked for again with the same code, and prints what the report says then', async () => {
		const id = await inState('issue failed');
		const [before] = await db.select().from(issues).where(eq(issues.reportId, id));
		await reopenReport(world.author, id, db);
		await expect(issueReport(world.author, id, db)).rejects.toThrow(ForbiddenError);
		await world.save(id, { commentary: 'Written after the failure.' });
		await world.send(id);
		await world.approve(id);
		await issueReport(world.author, id, db);
		const [after] = await db.select().from(issues).where(eq(issues.reportId, id));
		expect(after).toMatchObject({ id: before?.id, code: before?.code, state: 'queued' });
		expect((after?.model as ReportModel).text.commentary).toBe('Written after the failure.');
	});
});

describe('foreign and lesser people', () => {
	it('meet nothing, or are told that they may not', async () => {
		const id = await world.sent();
		const figureId = await enterFigure(world.reviewer, id, figure(world.runId), db);
		const { digest } = await reviewView(world.reviewer, id, db);
		const all: Record<string, (m: Membership | null) => Promise<unknown>> = {
			send: (m) => sendForReview(m, id, { reviewers: [], note: '', baseVersion: 1 }, db),
			recall: (m) => recallReview(m, id, db),
			approve: (m) => approveReport(m, id, { statement: 'x', digest }, db),
			return: (m) => returnReport(m, id, { reasons: 'x' }, db),
			reopen: (m) => reopenReport(m, id, db),
			comment: (m) => addComment(m, id, { place: 'text.answer', body: 'x' }, db),
			figure: (m) => enterFigure(m, id, figure(world.runId), db),
			withdraw: (m) => withdrawFigure(m, figureId, db),
			view: (m) => reviewView(m, id, db),
			state: (m) => reviewOf(m, id, db)
		};
		const elsewhere: Membership = {
			...world.guest,
			onlyDossiers: ['00000000-0000-4000-8000-000000000000']
		};
		for (const [name, act] of Object.entries(all)) {
			await expect(act(null), name).rejects.toThrow(NotFoundError);
			await expect(act(world.stranger), name).rejects.toThrow(NotFoundError);
			const asGuest = expect(act(elsewhere), name).rejects;
			if (['send', 'recall', 'reopen'].includes(name)) await asGuest.toThrow(ForbiddenError);
			else await asGuest.toThrow(NotFoundError);
			if (name !== 'view' && name !== 'state') {
				await expect(act(world.reader), name).rejects.toThrow(ForbiddenError);
			}
		}
	});
});

describe('any sequence of acts', () => {
	it('issues nothing without a valid approval or the rules, and lets no writer approve against them', async () => {
		const step = fc.record({
			act: fc.constantFrom(
				'save',
				'saveByBoth',
				'send',
				'recall',
				'approve',
				'approveByBoth',
				'approveByGuest',
				'return',
				'reopen',
				'issue',
				'fail',
				'allow',
				'forbid'
			)
		});
		await fc.assert(
			fc.asyncProperty(fc.array(step, { minLength: 4, maxLength: 14 }), async (steps) => {
				let selfApproval = false;
				await world.policy(false);
				const id = await world.draft();
				for (const { act } of steps) {
					const before = await getReport(world.author, id, db);
					const [issueBefore] = await db.select().from(issues).where(eq(issues.reportId, id));
					const roundsBefore = await db.select().from(reviews).where(eq(reviews.reportId, id));
					const done = await {
						save: () => world.save(id, { commentary: `${steps.length}` }),
						saveByBoth: () => world.save(id, {}, world.both),
						send: () => world.send(id),
						recall: () => recallReview(world.author, id, db),
						approve: () => world.approve(id),
						approveByBoth: () => world.approve(id, world.both),
						approveByGuest: () => world.approve(id, world.guest),
						return: () => returnReport(world.reviewer, id, { reasons: 'x' }, db),
						reopen: () => reopenReport(world.author, id, db),
						issue: () => issueReport(world.author, id, db),
						fail: () => world.endIssue(id, 'failed'),
						allow: () => world.policy((selfApproval = true)),
						forbid: () => world.policy((selfApproval = false))
					}
						[act]()
						.then(
							() => true,
							(error: unknown) => {
								const known = [ConflictError, ForbiddenError, InvalidInputError];
								if (!known.some((kind) => error instanceof kind)) throw error;
								return false;
							}
						);
					const rounds = await db.select().from(reviews).where(eq(reviews.reportId, id));
					const [row] = await db.select().from(reports).where(eq(reports.id, id));
					const hands = new Set([row?.createdBy, ...(row?.writers ?? [])]);
					const fresh = rounds.find(
						(round) =>
							round.state === 'approved' && roundsBefore.find((b) => b.id === round.id)?.state !== 'approved'
					);
					if (fresh !== undefined) {
						expect(fresh.independent).toBe(!hands.has(fresh.decidedBy));
						if (!fresh.independent) expect(selfApproval).toBe(true);
					}
					const [issue] = await db.select().from(issues).where(eq(issues.reportId, id));
					const asked =
						act === 'issue' && done && (issueBefore === undefined || issueBefore.state === 'failed');
					if (asked) {
						const approval = rounds.find((round) => round.state === 'approved');
						const printed = (issue?.model as ReportModel).review.kind;
						if (selfApproval) expect(['draft', 'approved']).toContain(before.state);
						else expect(approval).toMatchObject({ independent: true });
						const said = !approval
							? 'not-reviewed'
							: approval.independent
								? 'reviewed'
								: 'approved-by-author';
						expect(printed).toBe(said);
					}
					if (row?.state === 'approved' && issue === undefined) {
						expect(rounds.filter((round) => round.state === 'approved')).toHaveLength(1);
					}
					if (row?.state !== 'approved')
						expect(rounds.some((round) => round.state === 'approved')).toBe(false);
					expect(rounds.filter((round) => round.state === 'open').length).toBe(
						row?.state === 'in-review' ? 1 : 0
					);
				}
			}),
			{ numRuns: 25 }
		);
		await world.policy(false);
	}, 240_000);
});
