import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { newDraft } from '$lib/calculation/new-draft';
import type { ComputeResult } from '$lib/calculation/types';
import { emptyReportText } from '$lib/report/text';
import { readListQuery } from '$lib/lists/query';
import { calculationList, reportList } from '$lib/lists/shapes';
import { emptyDossier } from '$lib/schemas/dossier';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { calculations, reports, runs } from '../db/schema';
import { createDossier } from '../dossiers/create';
import { deleteDossier } from '../dossiers/delete';
import { showDossier } from '../dossiers/show';
import { listReports } from '../reports/list';
import { testDatabase } from '../testing/db';
import { member } from '../testing/members';
import { listCalculations } from './list';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let billing: Membership;
let stranger: Membership;
let dossierId: string;

const asked = (search = '') => readListQuery(new URLSearchParams(search), calculationList);
const askedReports = (search = '') => readListQuery(new URLSearchParams(search), reportList);

async function addCalculation(title: string, method: string | null): Promise<string> {
	const [row] = await db
		.insert(calculations)
		.values({
			organisationId: author.organisationId,
			dossierId,
			title,
			draft: { ...newDraft('find-value'), method }
		})
		.returning({ id: calculations.id });
	if (row === undefined) throw new Error('not stored');
	return row.id;
}

async function addRun(
	calculationId: string,
	value: number,
	minute: number,
	organisationId = author.organisationId
) {
	const result = {
		method: { id: 'solar-reflectance-index', version: '1.0.0' },
		outputs: { solarReflectanceIndex: { value, unit: '' } },
		series: { wide: { x: { values: [1, 2, 3] } } }
	} as unknown as ComputeResult;
	const [row] = await db
		.insert(runs)
		.values({
			organisationId,
			calculationId,
			draft: newDraft('find-value'),
			request: { method: 'solar-reflectance-index', inputs: {} },
			result,
			state: 'done',
			createdAt: new Date(Date.UTC(2026, 0, 1, 0, minute))
		})
		.returning({ id: runs.id });
	if (row === undefined) throw new Error('not stored');
	return row.id;
}

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	author = await member(db, ['author']);
	billing = await member(db, ['billing'], author);
	stranger = await member(db, ['owner', 'author']);
	dossierId = await createDossier(
		author,
		{ ...emptyDossier, title: 'Coast roofs', client: 'Marrow Coast' },
		db
	);
});
afterAll(() => drop());

describe('the list of calculations', () => {
	it('shows the latest finished run, the dossier and the method', async () => {
		const computed = await addCalculation('White sheet', 'solar-reflectance-index');
		await addRun(computed, 10, 1);
		await addRun(computed, 36, 2);
		await db.insert(runs).values({
			organisationId: author.organisationId,
			calculationId: computed,
			draft: newDraft('find-value'),
			request: { method: 'solar-reflectance-index', inputs: {} },
			state: 'failed'
		});
		await addCalculation('Not begun', null);
		await addCalculation('Ground', 'effective-temperature');

		const listed = await listCalculations(author, asked('sort=title'), undefined, db);
		expect(listed.rows.map((row) => [row.title, row.method, row.dossierTitle])).toEqual([
			['Ground', 'effective-temperature', 'Coast roofs'],
			['Not begun', null, 'Coast roofs'],
			['White sheet', 'solar-reflectance-index', 'Coast roofs']
		]);
		expect(listed.rows[0]?.outcome).toBeNull();
		expect(listed.rows[2]?.outcome).toEqual({
			method: 'solar-reflectance-index',
			outputs: { solarReflectanceIndex: { value: 36, unit: '' } },
			compared: null,
			scale: newDraft('find-value').temperatureUnit
		});
		const reflecting = await listCalculations(author, asked('q=reflectance+coast'), undefined, db);
		expect(reflecting.rows.map((row) => row.title)).toEqual(['White sheet']);
		expect(reflecting).toMatchObject({ matching: 1, total: 3 });
	});

	it('sorts by every column it offers, without losing a row', async () => {
		for (const sort of calculationList.columns) {
			for (const order of ['asc', 'desc']) {
				const listed = await listCalculations(author, asked(`sort=${sort}&order=${order}`), dossierId, db);
				expect(listed.rows).toHaveLength(3);
			}
		}
	});

	it('holds nothing of another organisation, nor of a deleted dossier', async () => {
		expect((await listCalculations(stranger, asked(), undefined, db)).total).toBe(0);
		expect((await listCalculations(stranger, asked(), dossierId, db)).rows).toEqual([]);
		await expect(listCalculations(billing, asked(), undefined, db)).rejects.toThrow(NotFoundError);
		const kept = dossierId;
		dossierId = await createDossier(author, { ...emptyDossier, title: 'Gone' }, db);
		await addCalculation('Gone with it', null);
		await deleteDossier(author, dossierId, db);
		dossierId = kept;
		expect((await listCalculations(author, asked('q=gone'), undefined, db)).rows).toEqual([]);
	});
});

describe('the list of reports', () => {
	it('shows number, addressee, state and the first run’s outcome; filters and sorts by state', async () => {
		const calculationId = await addCalculation('For the memo', 'solar-reflectance-index');
		const run = await addRun(calculationId, 84, 5);
		const theirs = await addRun(calculationId, 99, 6, stranger.organisationId);
		const base = {
			organisationId: author.organisationId,
			dossierId,
			template: 'client-memo',
			text: emptyReportText
		};
		await db.insert(reports).values([
			{
				...base,
				number: 'TB-0002',
				title: 'Roofs',
				state: 'issued',
				runIds: [run],
				createdBy: author.userId
			},
			{ ...base, number: 'TB-0010', title: 'Yard 5%', state: 'draft' },
			{ ...base, number: 'TB-0003', title: 'Smuggled', state: 'approved', runIds: [theirs] }
		]);
		const listed = await listReports(author, askedReports('sort=number'), undefined, db);
		expect(listed.rows.map((row) => row.number)).toEqual(['TB-0002', 'TB-0003', 'TB-0010']);
		expect(listed.rows[0]).toMatchObject({ addressee: 'Marrow Coast', state: 'issued' });
		expect(listed.rows[0]?.author).toMatch(/^Person /);
		expect(listed.rows[0]?.outcome?.outputs.solarReflectanceIndex?.value).toBe(84);
		// A run of another organisation shows nothing, even where its id got into a report.
		expect(listed.rows[1]?.outcome).toBeNull();
		expect(listed.rows[2]?.outcome).toBeNull();

		const states = await listReports(author, askedReports('sort=state'), undefined, db);
		expect(states.rows.map((row) => row.state)).toEqual(['draft', 'approved', 'issued']);
		const drafts = await listReports(author, askedReports('state=draft&q=5%25'), undefined, db);
		expect(drafts.rows.map((row) => row.title)).toEqual(['Yard 5%']);
		expect(drafts).toMatchObject({ matching: 1, total: 3 });
		for (const sort of reportList.columns) {
			expect((await listReports(author, askedReports(`sort=${sort}`), dossierId, db)).rows).toHaveLength(3);
		}
	});

	it('holds nothing of another organisation', async () => {
		expect((await listReports(stranger, askedReports(), undefined, db)).total).toBe(0);
		await expect(listReports(billing, askedReports(), undefined, db)).rejects.toThrow(NotFoundError);
	});

	it('stands on the dossier’s own page with its calculations', async () => {
		const page = await showDossier(author, dossierId, db);
		expect(page.reports.total).toBe(3);
		expect(page.calculations.rows.map((row) => row.title)).toContain('White sheet');
	});
});
