import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { emptyDossier, type DossierInput } from '$lib/schemas/dossier';
import { readListQuery } from '$lib/lists/query';
import { dossierList } from '$lib/lists/shapes';
import { ConflictError, ForbiddenError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { auditEvents, dossiers, reports } from '../db/schema';
import { emptyReportText } from '$lib/report/text';
import { testDatabase } from '../testing/db';
import { member } from '../testing/members';
import { createDossier } from './create';
import { deletedDossierTitle, deleteDossier, restoreDossier } from './delete';
import { listDossiers } from './list';
import { openDossier, showDossier } from './show';
import { updateDossier } from './update';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let reader: Membership;
let billing: Membership;
let stranger: Membership;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	author = await member(db, ['author']);
	reader = await member(db, ['reader'], author);
	billing = await member(db, ['billing'], author);
	stranger = await member(db, ['owner', 'author']);
});
afterAll(() => drop());

const input = (fields: Partial<DossierInput>): DossierInput => ({
	...emptyDossier,
	title: 'Roofs',
	...fields
});
const query = (search = '') => readListQuery(new URLSearchParams(search), dossierList);
const rowOf = async (id: string) => (await db.select().from(dossiers).where(eq(dossiers.id, id)))[0];
const actionsOn = async (id: string) =>
	(await db.select().from(auditEvents).where(eq(auditEvents.subject, id))).map((event) => event.action);

describe('a dossier', () => {
	it('is opened, shown, saved, deleted and brought back, each noted in the audit trail', async () => {
		const id = await createDossier(author, input({ title: ' Roof  sheets ', question: 'How hot?\r\n' }), db);
		const shown = await showDossier(reader, id, db);
		expect(shown.dossier).toMatchObject({
			title: 'Roof sheets',
			question: 'How hot?',
			createdBy: author.userId
		});
		expect(shown.calculations.total + shown.reports.total + shown.evidence.length).toBe(0);

		await updateDossier(author, id, input({ title: 'Roof', client: 'Housing Trust' }), 1, db);
		expect(await openDossier(author, id, db)).toMatchObject({
			title: 'Roof',
			client: 'Housing Trust',
			version: 2
		});

		await deleteDossier(author, id, db);
		await expect(showDossier(author, id, db)).rejects.toThrow(NotFoundError);
		await expect(deleteDossier(author, id, db)).rejects.toThrow(NotFoundError);
		expect((await listDossiers(author, query('q=Roof'), db)).rows).toEqual([]);
		expect(await deletedDossierTitle(author, id, db)).toBe('Roof');

		await restoreDossier(author, id, db);
		expect((await showDossier(author, id, db)).dossier.title).toBe('Roof');
		await expect(restoreDossier(author, id, db)).rejects.toThrow(NotFoundError);
		expect(await deletedDossierTitle(author, id, db)).toBeUndefined();
		expect(await actionsOn(id)).toEqual([
			'dossier.create',
			'dossier.update',
			'dossier.delete',
			'dossier.restore'
		]);
	});

	it('does not exist for another organisation, nor for somebody without a role or an account', async () => {
		const id = await createDossier(author, input({}), db);
		for (const nobody of [stranger, billing, null]) {
			await expect(showDossier(nobody, id, db)).rejects.toThrow(NotFoundError);
			await expect(openDossier(nobody, id, db)).rejects.toThrow(NotFoundError);
			await expect(updateDossier(nobody, id, input({}), 1, db)).rejects.toThrow(NotFoundError);
			await expect(deleteDossier(nobody, id, db)).rejects.toThrow(NotFoundError);
		}
		expect(await rowOf(id)).toMatchObject({ version: 1, deletedAt: null });
		await deleteDossier(author, id, db);
		await expect(restoreDossier(stranger, id, db)).rejects.toThrow(NotFoundError);
		expect(await deletedDossierTitle(stranger, id, db)).toBeUndefined();
		expect((await rowOf(id))?.deletedAt).not.toBeNull();
	});

	it('may be seen but not changed by a reader', async () => {
		const id = await createDossier(author, input({}), db);
		await expect(createDossier(reader, input({}), db)).rejects.toThrow(ForbiddenError);
		await expect(updateDossier(reader, id, input({ title: 'Mine' }), 1, db)).rejects.toThrow(ForbiddenError);
		await expect(deleteDossier(reader, id, db)).rejects.toThrow(ForbiddenError);
		await expect(restoreDossier(reader, id, db)).rejects.toThrow(ForbiddenError);
		expect(await rowOf(id)).toMatchObject({ title: 'Roofs', deletedAt: null });
	});

	it('takes no column that its form does not have', async () => {
		const smuggled = {
			...input({}),
			organisationId: stranger.organisationId,
			createdBy: stranger.userId,
			version: 9
		};
		const id = await createDossier(author, smuggled, db);
		await updateDossier(author, id, { ...smuggled, title: 'Still ours' }, 1, db);
		expect(await rowOf(id)).toMatchObject({
			organisationId: author.organisationId,
			createdBy: author.userId,
			title: 'Still ours',
			version: 2
		});
	});

	it('keeps what the first of two people saved', async () => {
		const id = await createDossier(author, input({}), db);
		const saves = await Promise.allSettled([
			updateDossier(author, id, input({ title: 'One' }), 1, db),
			updateDossier(author, id, input({ title: 'Two' }), 1, db)
		]);
		const refused = saves.filter((save) => save.status === 'rejected');
		expect(refused).toHaveLength(1);
		expect(refused[0]?.reason).toBeInstanceOf(ConflictError);
		const kept = saves[0]?.status === 'fulfilled' ? 'One' : 'Two';
		expect(await rowOf(id)).toMatchObject({ title: kept, version: 2 });
	});

	it('with an issued report stays', async () => {
		const id = await createDossier(author, input({}), db);
		await db.insert(reports).values({
			organisationId: author.organisationId,
			dossierId: id,
			number: 'TB-9001',
			template: 'client-memo',
			title: 'Memo',
			text: emptyReportText,
			state: 'issued'
		});
		await expect(deleteDossier(author, id, db)).rejects.toThrow(ConflictError);
		expect((await rowOf(id))?.deletedAt).toBeNull();
	});
});

describe('the list of dossiers', () => {
	it('searches every word in any field, and takes wildcards for themselves', async () => {
		const own = await member(db, ['author']);
		await createDossier(own, input({ title: 'Roof 100% white', client: 'Marrow Coast' }), db);
		await createDossier(
			own,
			input({ title: 'Roof 1000 white', client: 'Inland_Works', projectNumber: 'P-7' }),
			db
		);
		const titles = async (q: string) =>
			(await listDossiers(own, query(new URLSearchParams({ q }).toString()), db)).rows.map(
				(row) => row.title
			);
		expect(await titles('COAST roof')).toEqual(['Roof 100% white']);
		expect(await titles('100%')).toEqual(['Roof 100% white']);
		expect(await titles('d_w')).toEqual(['Roof 1000 white']);
		expect(await titles('p-7')).toEqual(['Roof 1000 white']);
		expect(await titles('\\')).toEqual([]);
		expect(await titles("' or 1=1 --")).toEqual([]);
		expect(await titles('\0')).toHaveLength(2);
	});

	it('sorts by each column both ways and pages without a gap', async () => {
		const own = await member(db, ['author']);
		for (let i = 0; i < 60; i++) {
			await createDossier(
				own,
				input({ title: `${i % 2 ? 'd' : 'D'}ossier ${String(i).padStart(2, '0')}` }),
				db
			);
		}
		const seen: string[] = [];
		for (let page = 1; page <= 3; page++) {
			const listed = await listDossiers(own, query(`sort=title&order=asc&page=${page}`), db);
			expect(listed).toMatchObject({ page, pages: 3, matching: 60, total: 60 });
			seen.push(...listed.rows.map((row) => row.title));
		}
		expect(seen.map((title) => title.toLowerCase())).toEqual(
			Array.from({ length: 60 }, (_, i) => `dossier ${String(i).padStart(2, '0')}`)
		);
		expect((await listDossiers(own, query('sort=title&order=desc'), db)).rows[0]?.title).toBe('dossier 59');
		// All have the same client: the id keeps the pages apart.
		const pages = [1, 2, 3].map((page) => listDossiers(own, query(`sort=client&page=${page}`), db));
		const ids = (await Promise.all(pages)).flatMap((listed) => listed.rows.map((row) => row.id));
		expect(new Set(ids).size).toBe(60);
		expect((await listDossiers(own, query('page=99'), db)).page).toBe(3);
		expect(await listDossiers(own, query('q=nowhere'), db)).toMatchObject({
			rows: [],
			matching: 0,
			total: 60
		});
	});

	it('is hidden from whoever may not read dossiers, and holds no foreign one', async () => {
		await expect(listDossiers(billing, query(), db)).rejects.toThrow(NotFoundError);
		await expect(listDossiers(null, query(), db)).rejects.toThrow(NotFoundError);
		const id = await createDossier(stranger, input({ title: 'Foreign' }), db);
		const found = await listDossiers(author, query('q=Foreign'), db);
		expect(found.rows).toEqual([]);
		expect((await listDossiers(stranger, query('q=Foreign'), db)).rows.map((row) => row.id)).toEqual([id]);
	});
});
