import { eq } from 'drizzle-orm';
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { chooseMethod } from '$lib/calculation/new-draft';
import { methodById } from '$lib/methods';
import { engineVersion } from '$lib/record';
import type { ReportModel } from '$lib/report';
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { giveExports } from '../billing/testing/exports';
import { createCalculation, deleteCalculation, saveDraft } from '../calculations/change';
import { getCalculation } from '../calculations/load';
import { getRun, latestRun, startRun } from '../calculations/runs';
import type { Database } from '../db';
import { dossiers, issues, organisations, previews, reports, runs, users } from '../db/schema';
import { installQueues } from '../jobs/install';
import { setTestEnvironment } from '../testing/environment';
import { rootPem } from '../signing/authority';
import { verifyReport } from '../verification';
import { testDatabase } from '../testing/db';
import { createReport, deleteReport, restoreReport, saveReport } from './change';
import { dutiesOf, issuedFile, issueOf, issueReport } from './issue';
import { reportIssuing } from './issuing';
import { getReport } from './load';
import { getPreview, previewFile, requestPreview } from './preview';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let stranger: Membership;
let dossierId: string;
let runId: string;

async function founder(name: string, prefix: string): Promise<Membership> {
	const [org] = await db
		.insert(organisations)
		.values({ name, numberPrefix: prefix, address: ['1 Test Road'] })
		.returning({ id: organisations.id });
	const [user] = await db
		.insert(users)
		.values({ name: `Author of ${name}`, email: `a@${prefix.toLowerCase()}.example` })
		.returning({ id: users.id });
	if (org === undefined || user === undefined) throw new Error('not stored');
	await giveExports(db, org.id, 100);
	return {
		organisationId: org.id,
		organisationName: name,
		userId: user.id,
		roles: ['owner', 'author'],
		onlyDossiers: null
	};
}

async function computedTile(membership: Membership, dossier: string): Promise<string> {
	const method = methodById('solar-reflectance-index');
	if (method === undefined) throw new Error('no method');
	const id = await createCalculation(membership, dossier, { title: 'Tile', kind: 'find-value' }, db);
	const { draft, version } = await getCalculation(membership, id, db);
	const filled = chooseMethod(draft, method);
	for (const [input, value] of [
		['solarReflectance', '0.33'],
		['thermalEmittance', '0.90']
	] as const) {
		const before = filled.assumptions[input];
		if (before === undefined) throw new Error('no input');
		filled.assumptions[input] = {
			...before,
			value,
			source: { kind: 'citation', text: 'A table', evidenceId: null }
		};
	}
	await saveDraft(membership, id, { draft: filled, baseVersion: version }, db);
	const first = await startRun(membership, id, db);
	// Asked for twice it is one run.
	expect(await startRun(membership, id, db)).toBe(first);
	expect((await latestRun(membership, id, db))?.id).toBe(first);
	return first;
}

const make = () => createReport(author, dossierId, { template: 'client-memo', runId }, db);

async function change(id: string, text: Record<string, unknown> = {}, more: Record<string, unknown> = {}) {
	const report = await getReport(author, id, db);
	return saveReport(
		author,
		id,
		{
			title: report.title,
			text: { ...report.text, ...text },
			runIds: report.runIds,
			baseVersion: report.version,
			...more
		},
		db
	);
}

beforeAll(async () => {
	setTestEnvironment();
	let url: string;
	({ db, url, drop } = await testDatabase());
	const pool = new pg.Pool({ connectionString: url, max: 2 });
	await installQueues(pool);
	await pool.end();
	author = await founder('North Works', 'NW');
	stranger = await founder('South Works', 'SW');
	const [dossier] = await db
		.insert(dossiers)
		.values({
			organisationId: author.organisationId,
			title: 'Tiles',
			question: 'What index has the tile?',
			client: 'A Client'
		})
		.returning({ id: dossiers.id });
	if (dossier === undefined) throw new Error('not stored');
	dossierId = dossier.id;
	runId = await computedTile(author, dossierId);
});
afterAll(async () => {
	await drop();
});

describe('runs', () => {
	it('are computed anew where an earlier version of the code computed the same draft', async () => {
		const first = await computedTile(author, dossierId);
		const { calculationId } = await getRun(author, first, db);
		expect(await startRun(author, calculationId, db)).toBe(first);
		await db.update(runs).set({ engineVersion: '0.0.1' }).where(eq(runs.id, first));
		const second = await startRun(author, calculationId, db);
		expect(second).not.toBe(first);
		expect((await getRun(author, second, db)).engineVersion).toBe(engineVersion);
		expect(await startRun(author, calculationId, db)).toBe(second);
	});
});

describe('reports', () => {
	it('number themselves without gaps or doubles, also in parallel', async () => {
		const ids = await Promise.all(Array.from({ length: 6 }, make));
		const numbers = await Promise.all(ids.map(async (id) => (await getReport(author, id, db)).number));
		expect(new Set(numbers).size).toBe(6);
		expect(numbers.every((number) => /^NW-\d{4}$/.test(number))).toBe(true);
	});

	it('start with the dossier’s question and the computed answer', async () => {
		const report = await getReport(author, await make(), db);
		expect(report.text.question).toBe('What index has the tile?');
		expect(report.text.answer).toMatch(/3[56]\.\d/);
	});

	it('refuse a save from an older version, unknown fields and foreign runs', async () => {
		const id = await make();
		await change(id, { commentary: 'fir\0st\ud800' });
		expect((await getReport(author, id, db)).text.commentary).toBe('first');
		await expect(change(id, { commentary: 'second' }, { baseVersion: 1 })).rejects.toThrow(ConflictError);
		await expect(change(id, {}, { state: 'issued' })).rejects.toThrow(InvalidInputError);
		await expect(change(id, {}, { title: ' ' })).rejects.toMatchObject({
			fields: { title: expect.any(String) as string }
		});
		await expect(change(id, {}, { runIds: ['00000000-0000-4000-8000-000000000000'] })).rejects.toThrow(
			NotFoundError
		);
	});

	it('keep leading with the result they began with, however the form orders the chosen ones', async () => {
		const id = await make();
		const second = await computedTile(author, dossierId);
		await change(id, {}, { runIds: [second, runId, second] });
		expect((await getReport(author, id, db)).runIds).toEqual([runId, second]);
		await change(id, {}, { runIds: [second] });
		expect((await getReport(author, id, db)).runIds).toEqual([second]);
	});

	it('can be deleted and brought back while they are drafts', async () => {
		const id = await make();
		await deleteReport(author, id, db);
		await expect(getReport(author, id, db)).rejects.toThrow(NotFoundError);
		await restoreReport(author, id, db);
		expect((await getReport(author, id, db)).id).toBe(id);
	});

	it('do not exist for another organisation', async () => {
		const id = await make();
		const { text, title, runIds, version } = await getReport(author, id, db);
		const acts: ((m: Membership | null) => Promise<unknown>)[] = [
			(m) => getReport(m, id, db),
			(m) => saveReport(m, id, { text, title, runIds, baseVersion: version }, db),
			(m) => deleteReport(m, id, db),
			(m) => issueReport(m, id, db),
			(m) => requestPreview(m, id, db),
			(m) => issuedFile(m, id, db),
			(m) => getRun(m, runId, db),
			(m) => createReport(m, dossierId, { template: 'client-memo', runId: null }, db)
		];
		for (const act of acts) {
			await expect(act(stranger)).rejects.toThrow(NotFoundError);
			await expect(act(null)).rejects.toThrow(NotFoundError);
		}
		const reader: Membership = { ...author, roles: ['reader'] };
		await expect(issueReport(reader, id, db)).rejects.toThrow(ForbiddenError);
		await expect(deleteReport(reader, id, db)).rejects.toThrow(ForbiddenError);
	});
});

describe('issuing', () => {
	it('is refused while a duty is unmet, and names the place', async () => {
		const id = await make();
		await change(id, { question: ' ' });
		expect((await dutiesOf(author, await getReport(author, id, db), db)).map(({ place }) => place)).toContain(
			'text.question'
		);
		await expect(issueReport(author, id, db)).rejects.toMatchObject({
			fields: { 'text.question': expect.any(String) as string }
		});
		expect((await getReport(author, id, db)).state).toBe('draft');
	});

	it('is refused where the organisation wants a second reader', async () => {
		const id = await make();
		const policy = (selfApproval: boolean) =>
			db.update(organisations).set({ selfApproval }).where(eq(organisations.id, author.organisationId));
		await policy(false);
		await expect(issueReport(author, id, db)).rejects.toThrow(ForbiddenError);
		await policy(true);
		await expect(issueReport(author, id, db)).resolves.toEqual(expect.any(String));
	});

	it('names a character that cannot be printed', async () => {
		const id = await make();
		await change(id, { commentary: 'Hot 🔥' });
		await expect(issueReport(author, id, db)).rejects.toThrow(/🔥|U\+1F525/u);
		await expect(requestPreview(author, id, db)).rejects.toThrow(InvalidInputError);
	});

	it('asked for many times at once is one issue with one code, and closes the text', async () => {
		const id = await make();
		const asked = await Promise.all(Array.from({ length: 8 }, () => issueReport(author, id, db)));
		expect(new Set(asked).size).toBe(1);
		const rows = await db.select().from(issues).where(eq(issues.reportId, id));
		expect(rows).toHaveLength(1);
		expect(rows[0]?.code).toMatch(/^[2-9A-HJKMNP-TV-Z]{4}-[2-9A-HJKMNP-TV-Z]{4}$/);
		await expect(change(id, { commentary: 'late' })).rejects.toThrow(ConflictError);
		await expect(deleteReport(author, id, db)).rejects.toThrow(ConflictError);
		await expect(issuedFile(author, id, db)).rejects.toThrow(NotFoundError);
	});

	it('freezes what is printed: later changes elsewhere do not reach the document', async () => {
		const id = await make();
		await issueReport(author, id, db);
		const [row] = await db.select().from(issues).where(eq(issues.reportId, id));
		if (row === undefined) throw new Error('no issue');
		const signal = new AbortController().signal;
		const first = await reportIssuing.render(row, db, signal);
		await db.update(dossiers).set({ client: 'Somebody Else' }).where(eq(dossiers.id, dossierId));
		const second = await reportIssuing.render(row, db, signal);
		await db.update(dossiers).set({ client: 'A Client' }).where(eq(dossiers.id, dossierId));
		expect(Buffer.from(second).equals(Buffer.from(first))).toBe(true);
	});

	it('hands out only a file that verifies, and says why another one would not', async () => {
		const id = await make();
		await issueReport(author, id, db);
		const [row] = await db.select().from(issues).where(eq(issues.reportId, id));
		if (row === undefined) throw new Error('no issue');
		const signal = new AbortController().signal;
		const { pdf } = await reportIssuing.sign(row, await reportIssuing.render(row, db, signal), db);
		expect(await verifyReport(pdf, { rootPem: await rootPem(db) })).toMatchObject({
			verdict: 'genuine',
			record: { recomputed: true }
		});
		// A figure that the record does not compute to, as an outdated run would bring.
		const model = structuredClone(row.model) as ReportModel;
		const index = model.runs[0]?.result.outputs.solarReflectanceIndex;
		if (index === undefined) throw new Error('no index');
		index.value += 1;
		const wrong = { ...row, model };
		await expect(
			reportIssuing.sign(wrong, await reportIssuing.render(wrong, db, signal), db)
		).rejects.toThrow(/would not verify \(record-differs\)/);
	});

	it('is refused for a run of another version of the computing code', async () => {
		const id = await make();
		await db.update(runs).set({ engineVersion: '0.9.0' }).where(eq(runs.id, runId));
		await expect(issueReport(author, id, db)).rejects.toMatchObject({
			fields: { [`run:${runId}`]: expect.stringContaining('0.9.0') as string }
		});
		await db.update(runs).set({ engineVersion }).where(eq(runs.id, runId));
	});

	it('does not take in a result of a deleted calculation', async () => {
		const other = await computedTile(author, dossierId);
		const { calculationId } = await getRun(author, other, db);
		await deleteCalculation(author, calculationId, db);
		const id = await make();
		await expect(change(id, {}, { runIds: [runId, other] })).rejects.toMatchObject({
			fields: { runs: expect.stringContaining('deleted') as string }
		});
	});

	it('that failed is tried again with the same code', async () => {
		const id = await make();
		const issueId = await issueReport(author, id, db);
		await db.update(issues).set({ state: 'failed', problem: 'no paper' }).where(eq(issues.id, issueId));
		const before = await issueOf(author, await getReport(author, id, db), db);
		expect(await issueReport(author, id, db)).toBe(issueId);
		const after = await issueOf(author, await getReport(author, id, db), db);
		expect(after).toMatchObject({ state: 'queued', problem: null, code: before?.code });
	});

	it('without an addressee has to be said outright', async () => {
		await db.update(dossiers).set({ client: '' }).where(eq(dossiers.id, dossierId));
		const id = await make();
		const places = async () =>
			(await dutiesOf(author, await getReport(author, id, db), db)).map(({ place }) => place);
		expect(await places()).toContain('dossier.client');
		await change(id, { withoutAddressee: true });
		expect(await places()).not.toContain('dossier.client');
		await db.update(dossiers).set({ client: 'A Client' }).where(eq(dossiers.id, dossierId));
	});
});

describe('previews', () => {
	it('of the same version are one, and belong to the organisation', async () => {
		const id = await make();
		const first = await requestPreview(author, id, db);
		expect(await requestPreview(author, id, db)).toBe(first);
		await change(id, { commentary: 'new' });
		expect(await requestPreview(author, id, db)).not.toBe(first);
		await expect(getPreview(stranger, first, db)).rejects.toThrow(NotFoundError);
		await db
			.update(previews)
			.set({ state: 'done', pdf: Buffer.from('x') })
			.where(eq(previews.id, first));
		await expect(previewFile(stranger, first, db)).rejects.toThrow(NotFoundError);
		expect((await previewFile(author, first, db)).toString()).toBe('x');
		expect((await db.select().from(reports).where(eq(reports.id, id)))[0]?.state).toBe('draft');
	});
});
