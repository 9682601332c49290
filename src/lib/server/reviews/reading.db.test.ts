import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { saveDraft } from '../calculations/change';
import { getCalculation } from '../calculations/load';
import { startRun } from '../calculations/runs';
import { ForbiddenError, InvalidInputError, NotFoundError, TooManyRequestsError } from '../access/errors';
import type { Database } from '../db';
import { reviewComments, reviewerFigures, runs } from '../db/schema';
import { saveReport } from '../reports/change';
import { getReport } from '../reports/load';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { addComment, answerComment, listComments, settleComment, unsettleComment } from './comments';
import { returnReport } from './decide';
import { enterFigure, listFigures, withdrawFigure, type FigureInput } from './own-figure';
import { recomputeReport } from './recompute';
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

const figure = (change: Partial<FigureInput> = {}): FigureInput => ({
	runId: world.runId,
	output: 'solarReflectanceIndex',
	kind: 'value',
	value: '36',
	unit: '',
	giveOrTake: '2',
	averages: '',
	route: 'From a printed table of like tiles',
	...change
});

describe('the review page', () => {
	it('shows every assumption with value, spread, source and note, every result and every text', async () => {
		const id = await world.sent();
		const view = await reviewView(world.guest, id, db);
		const places = view.lines.map(({ place }) => place);
		expect(new Set(places).size).toBe(places.length);
		const at = `run:${world.runId}`;
		expect(places).toEqual(
			expect.arrayContaining([
				'report.title',
				'dossier.client',
				'organisation.name',
				'text.question',
				'text.answer',
				'text.commentary',
				'text.leftOut',
				at,
				`${at}/output:solarReflectanceIndex`,
				`${at}/deviations`
			])
		);
		const reflectance = view.lines.find(({ place }) => place === `${at}/input:solarReflectance`);
		expect(reflectance).toMatchObject({ text: '0.33', source: expect.stringContaining('A table') as string });
		expect(view).toMatchObject({ mayDecide: true, whyNot: null, ownWork: false, comparedWith: null });
		expect(view.lines.every(({ changed }) => changed === null)).toBe(true);
		expect(view.figureTargets[0]).toMatchObject({
			runId: world.runId,
			averages: expect.any(String) as string
		});
		expect(await reviewView(world.author, id, db)).toMatchObject({ mayDecide: false, mayEnterFigure: false });
	});

	it('shows what changed since the reviewer decided last, also where it was computed anew', async () => {
		const id = await world.sent();
		const remarked = `run:${world.runId}/input:solarReflectance`;
		await addComment(world.reviewer, id, { place: remarked, body: 'New or aged?' }, db);
		await returnReport(world.reviewer, id, { reasons: 'The reflectance is for a new tile.' }, db);
		const { draft, version } = await getCalculation(world.author, world.calculationId, db);
		const before = draft.assumptions.solarReflectance;
		if (before === undefined) throw new Error('no input');
		draft.assumptions.solarReflectance = { ...before, value: '0.28' };
		await saveDraft(world.author, world.calculationId, { draft, baseVersion: version }, db);
		const runId = await startRun(world.author, world.calculationId, db);
		const report = await getReport(world.author, id, db);
		const { title, text } = report;
		await saveReport(world.author, id, { title, text, runIds: [runId], baseVersion: report.version }, db);
		await world.send(id);
		const view = await reviewView(world.reviewer, id, db);
		expect(view.comparedWith?.round).toBe(1);
		const changed = new Map(
			view.lines.filter((line) => line.changed).map((line) => [line.place, line.changed])
		);
		expect(changed.get(`run:${runId}/input:solarReflectance`)?.before).toContain('0.33');
		expect(changed.has(`run:${runId}/output:solarReflectanceIndex`)).toBe(true);
		expect(changed.has(`run:${runId}/input:thermalEmittance`)).toBe(false);
		expect(changed.has('report.title')).toBe(false);
		expect(view.gone).toEqual([]);
		// The remark is on the same assumption of the later run.
		const line = view.lines.find(({ place }) => place === `run:${runId}/input:solarReflectance`);
		expect(line?.comments).toMatchObject([{ body: 'New or aged?', lineChanged: true }]);
	});
});

describe('remarks', () => {
	it('quote the line as the report has it, are answered, settled and opened again', async () => {
		const id = await world.sent();
		const place = `run:${world.runId}/input:solarReflectance`;
		const remark = await addComment(world.guest, id, { place, body: ' Aged or \0new? ' }, db);
		const answer = await answerComment(world.author, remark, { body: 'New.' }, db);
		expect(answer.reportId).toBe(id);
		await answerComment(world.guest, answer.id, { body: 'Then say so.' }, db);
		const [thread, ...others] = await listComments(world.author, id, db);
		expect(others).toEqual([]);
		expect(thread).toMatchObject({
			place,
			body: 'Aged or new?',
			round: 1,
			lineChanged: false,
			writtenBy: { guest: true }
		});
		expect(thread?.quoted).toContain('0.33');
		expect(thread?.answers.map(({ body }) => body)).toEqual(['New.', 'Then say so.']);
		expect(await settleComment(world.reviewer, remark, db)).toBe(id);
		const [first] = await listComments(world.author, id, db);
		await settleComment(world.author, remark, db);
		const [again] = await listComments(world.author, id, db);
		expect(again?.settledBy).toEqual(first?.settledBy);
		await unsettleComment(world.author, remark, db);
		expect((await listComments(world.author, id, db))[0]?.settledAt).toBeNull();
	});

	it('are kept once where a form is sent twice, and twice where somebody means it', async () => {
		const id = await world.sent();
		const given = { place: 'text.answer', body: 'Which year?' };
		const sent = await Promise.all([1, 2, 3].map(() => addComment(world.reviewer, id, given, db)));
		expect(new Set(sent).size).toBe(1);
		await addComment(world.reviewer, id, { ...given, body: 'And which place?' }, db);
		await addComment(world.guest, id, given, db);
		expect(await listComments(world.author, id, db)).toHaveLength(3);
		await db
			.update(reviewComments)
			.set({ writtenAt: new Date(Date.now() - 3_600_000) })
			.where(eq(reviewComments.reportId, id));
		await addComment(world.reviewer, id, given, db);
		expect(await listComments(world.author, id, db)).toHaveLength(4);
	});

	it('say that their line changed, and stay when it is gone', async () => {
		const id = await world.draft();
		await addComment(world.reviewer, id, { place: 'text.commentary', body: 'Say more.' }, db);
		await world.save(id, { commentary: 'More.' });
		expect((await listComments(world.author, id, db))[0]).toMatchObject({ round: 0, lineChanged: true });
		await db.update(reviewComments).set({ place: 'run:gone/input:x' }).where(eq(reviewComments.reportId, id));
		const { gone } = await reviewView(world.author, id, db);
		expect(gone).toMatchObject([{ place: 'run:gone/input:x', comments: [{ body: 'Say more.' }] }]);
	});

	it('are refused without words, with too many, on no line, and by whom may not', async () => {
		const id = await world.sent();
		const on = (place: string, body: string) => addComment(world.reviewer, id, { place, body }, db);
		await expect(on('text.answer', ' ')).rejects.toMatchObject({
			fields: { body: expect.any(String) as string }
		});
		await expect(on('text.answer', 'x'.repeat(4001))).rejects.toThrow(InvalidInputError);
		await expect(on('text.nothing', 'x')).rejects.toMatchObject({
			fields: { place: expect.any(String) as string }
		});
		const remark = await on('text.answer', 'x');
		await expect(answerComment(world.stranger, remark, { body: 'x' }, db)).rejects.toThrow(NotFoundError);
		await expect(settleComment(world.reader, remark, db)).rejects.toThrow(ForbiddenError);
		const elsewhere = { ...world.guest, onlyDossiers: ['00000000-0000-4000-8000-000000000000'] };
		await expect(answerComment(elsewhere, remark, { body: 'x' }, db)).rejects.toThrow(NotFoundError);
		await expect(settleComment(elsewhere, remark, db)).rejects.toThrow(NotFoundError);
	});

	it('have a pace', async () => {
		const id = await world.draft();
		const many = Array.from({ length: 62 }, (_, i) =>
			addComment(world.both, id, { place: 'text.answer', body: `${i}` }, db)
		);
		const outcomes = await Promise.allSettled(many);
		const refused = outcomes.filter((one) => one.status === 'rejected');
		expect(refused.length).toBeGreaterThanOrEqual(1);
		for (const { reason } of refused) expect(reason).toBeInstanceOf(TooManyRequestsError);
	});
});

describe('a reviewer’s own figure', () => {
	it('is kept with its sentence, belongs to what is approved, and is taken back only by its reviewer', async () => {
		const id = await world.sent();
		const before = (await reviewView(world.reviewer, id, db)).digest;
		const figureId = await enterFigure(world.reviewer, id, figure(), db);
		const view = await reviewView(world.reviewer, id, db);
		expect(view.digest).not.toBe(before);
		expect(view.figures).toMatchObject([
			{
				figure: '36, give or take 2',
				mayWithdraw: true,
				sentence: expect.stringContaining('not compared') as string
			}
		]);
		await expect(withdrawFigure(world.guest, figureId, db)).rejects.toThrow(ForbiddenError);
		expect(await withdrawFigure(world.reviewer, figureId, db)).toBe(id);
		expect((await reviewView(world.reviewer, id, db)).digest).toBe(before);
		expect(await listFigures(world.author, id, db)).toMatchObject([
			{ withdrawnAt: expect.any(Date) as Date, mayWithdraw: false }
		]);
		expect(await db.$count(reviewerFigures, eq(reviewerFigures.reportId, id))).toBe(1);
	});

	it('is entered once where a form is sent twice, and again once it was taken back', async () => {
		const id = await world.sent();
		const entered = await Promise.all([1, 2].map(() => enterFigure(world.reviewer, id, figure(), db)));
		expect(new Set(entered).size).toBe(1);
		await withdrawFigure(world.reviewer, entered[0] ?? '', db);
		expect(entered).not.toContain(await enterFigure(world.reviewer, id, figure(), db));
		expect(await listFigures(world.author, id, db)).toHaveLength(2);
	});

	it('is refused by field where it cannot stand beside the result', async () => {
		const id = await world.sent();
		const faults: [Partial<FigureInput>, string][] = [
			[{ value: 'about 36' }, 'value'],
			[{ value: '1,361' }, 'value'],
			[{ unit: 'K' }, 'unit'],
			[{ unit: 'nonsense' }, 'unit'],
			[{ giveOrTake: '-2' }, 'giveOrTake'],
			[{ kind: 'upper-bound', giveOrTake: '2' }, 'giveOrTake'],
			[{ output: 'other' }, 'output'],
			[{ runId: '00000000-0000-4000-8000-000000000000' }, 'output'],
			[{ route: ' ' }, 'route'],
			[{ averages: 'x'.repeat(301) }, 'averages']
		];
		for (const [change, field] of faults) {
			await expect(enterFigure(world.reviewer, id, figure(change), db), field).rejects.toMatchObject({
				fields: { [field]: expect.any(String) as string }
			});
		}
		expect(await listFigures(world.reviewer, id, db)).toEqual([]);
	});

	it('is not entered by one who wrote the report, where a second reader is wanted', async () => {
		const id = await world.draft();
		await world.save(id, {}, world.both);
		await world.send(id);
		await expect(enterFigure(world.both, id, figure(), db)).rejects.toThrow(ForbiddenError);
	});
});

describe('recomputing', () => {
	it('compares every figure, says where one differs, and is remembered for who asked', async () => {
		const id = await world.sent();
		const fine = await recomputeReport(world.reviewer, id, db);
		expect(fine).toMatchObject({ done: true, same: true, problem: null });
		expect(fine.figures).toBeGreaterThan(10);
		expect((await reviewView(world.reviewer, id, db)).recomputed).toMatchObject({
			same: true,
			figures: fine.figures
		});
		expect((await reviewView(world.guest, id, db)).recomputed).toBeNull();

		const [run] = await db.select().from(runs).where(eq(runs.id, world.runId));
		const record = JSON.parse(run?.record ?? '{}') as {
			result: { outputs: Record<string, { value: number }> };
		};
		const output = record.result.outputs.solarReflectanceIndex;
		if (output === undefined) throw new Error('no output');
		output.value += 1;
		await db
			.update(runs)
			.set({ record: JSON.stringify(record) })
			.where(eq(runs.id, world.runId));
		const wrong = await recomputeReport(world.reviewer, id, db);
		expect(wrong).toMatchObject({ done: true, same: false });
		expect(wrong.runs[0]?.differences.map(({ path }) => path)).toContain(
			'/outputs/solarReflectanceIndex/value'
		);
		await db
			.update(runs)
			.set({ record: run?.record ?? null })
			.where(eq(runs.id, world.runId));
	});
});
