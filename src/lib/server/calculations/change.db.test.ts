import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { chooseMethod } from '$lib/calculation/new-draft';
import { methodById } from '$lib/methods';
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership, MemberRole } from '../access/membership';
import type { Database } from '../db';
import { dossiers, memberships, organisations, users } from '../db/schema';
import { testDatabase } from '../testing/db';
import {
	createCalculation,
	deleteCalculation,
	duplicateCalculation,
	restoreCalculation,
	restoreVersion,
	saveDraft
} from './change';
import { getCalculation, getVersion, listVersions } from './load';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let reader: Membership;
let stranger: Membership;
let dossierId: string;

async function member(organisation: string, roles: MemberRole[]): Promise<Membership> {
	const [org] = await db
		.insert(organisations)
		.values({ name: organisation, numberPrefix: 'XX' })
		.returning({ id: organisations.id });
	const [user] = await db
		.insert(users)
		.values({ name: organisation, email: `${roles.join('-')}@${organisation}.example` })
		.returning({ id: users.id });
	if (org === undefined || user === undefined) throw new Error('not stored');
	await db.insert(memberships).values({ organisationId: org.id, userId: user.id, roles });
	return {
		organisationId: org.id,
		organisationName: organisation,
		userId: user.id,
		roles,
		onlyDossiers: null
	};
}

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	author = await member('north', ['author']);
	stranger = await member('south', ['owner', 'author']);
	reader = { ...author, roles: ['reader'] };
	const [dossier] = await db
		.insert(dossiers)
		.values({ organisationId: author.organisationId, title: 'Roofs' })
		.returning({ id: dossiers.id });
	if (dossier === undefined) throw new Error('not stored');
	dossierId = dossier.id;
});
afterAll(async () => {
	await drop();
});

const make = () => createCalculation(author, dossierId, { title: 'Sheet', kind: 'find-value' }, db);

describe('calculations', () => {
	it('are made, read and saved with a version that counts', async () => {
		const id = await make();
		const before = await getCalculation(author, id, db);
		const draft = { ...before.draft, kind: 'test-limit' as const };
		const version = await saveDraft(author, id, { draft, baseVersion: before.version }, db);
		expect(version).toBe(before.version + 1);
		expect((await getCalculation(author, id, db)).draft.kind).toBe('test-limit');
		// The same again is no new version, whatever it started from: a retried request happens once.
		expect(await saveDraft(author, id, { draft, baseVersion: before.version }, db)).toBe(version);
	});

	it('refuse to overwrite what another tab saved', async () => {
		const id = await make();
		const { draft, version } = await getCalculation(author, id, db);
		await saveDraft(author, id, { draft: { ...draft, kind: 'check-claim' }, baseVersion: version }, db);
		await expect(
			saveDraft(author, id, { draft: { ...draft, kind: 'test-limit' }, baseVersion: version }, db)
		).rejects.toThrow(ConflictError);
	});

	it('let one of many parallel saves from the same version through', async () => {
		const id = await make();
		const { draft, version } = await getCalculation(author, id, db);
		const tries = await Promise.allSettled(
			Array.from({ length: 8 }, (_, i) =>
				saveDraft(author, id, { draft: { ...draft, visited: [`v${i}`] }, baseVersion: version }, db)
			)
		);
		expect(tries.filter((t) => t.status === 'fulfilled')).toHaveLength(1);
	});

	it('refuse what is no draft, and unknown keys in one', async () => {
		const id = await make();
		const { draft, version } = await getCalculation(author, id, db);
		for (const wrong of [null, {}, { ...draft, organisationId: stranger.organisationId }]) {
			await expect(saveDraft(author, id, { draft: wrong, baseVersion: version }, db)).rejects.toThrow(
				InvalidInputError
			);
		}
	});

	it('store text without the characters that no database holds', async () => {
		const id = await createCalculation(author, dossierId, { title: 'Sh\0eet', kind: 'find-value' }, db);
		const { draft, version, title } = await getCalculation(author, id, db);
		expect(title).toBe('Sheet');
		const seed = 'noon\0mark\ud800';
		const typed = { ...draft, evaluation: { ...draft.evaluation, seed } };
		await saveDraft(author, id, { draft: typed, baseVersion: version, title: 'Roof\0' }, db);
		const saved = await getCalculation(author, id, db);
		expect([saved.title, saved.draft.evaluation.seed]).toEqual(['Roof', 'noonmark']);
	});

	it('take no word of a browser for what is the method’s default', async () => {
		const id = await make();
		const { draft, version } = await getCalculation(author, id, db);
		const method = methodById('solar-reflectance-index');
		if (method === undefined) throw new Error('no method');
		const chosen = chooseMethod(draft, method);
		const air = chosen.assumptions.airTemperature;
		if (air === undefined) throw new Error('no air temperature');
		const forged = { ...air, value: '350', source: { ...air.source, text: 'Endorsed by an authority' } };
		const sent = { ...chosen, assumptions: { ...chosen.assumptions, airTemperature: forged } };
		await saveDraft(author, id, { draft: sent, baseVersion: version }, db);
		const saved = (await getCalculation(author, id, db)).draft.assumptions.airTemperature;
		expect(saved).toMatchObject({ value: '350', source: { kind: null, text: '' } });
	});

	it('keep versions that can be read and restored', async () => {
		const id = await make();
		const first = await getCalculation(author, id, db);
		await saveDraft(
			author,
			id,
			{ draft: { ...first.draft, kind: 'test-limit' }, baseVersion: first.version },
			db
		);
		expect((await getVersion(author, id, 1, db)).kind).toBe('find-value');
		await restoreVersion(author, id, 1, db);
		expect((await getCalculation(author, id, db)).draft.kind).toBe('find-value');
		// What stood there before is a version still, however shortly before it was saved.
		const [restored, before] = await listVersions(author, id, db);
		expect((await getVersion(author, id, restored?.version ?? 0, db)).kind).toBe('find-value');
		expect((await getVersion(author, id, before?.version ?? 0, db)).kind).toBe('test-limit');
	});

	it('can be duplicated, deleted and brought back', async () => {
		const id = await make();
		const copy = await duplicateCalculation(author, id, db);
		expect((await getCalculation(author, copy, db)).title).toBe('Sheet (copy)');
		await deleteCalculation(author, copy, db);
		await expect(getCalculation(author, copy, db)).rejects.toThrow(NotFoundError);
		await restoreCalculation(author, copy, db);
		expect((await getCalculation(author, copy, db)).id).toBe(copy);
		await expect(restoreCalculation(author, copy, db)).rejects.toThrow(NotFoundError);
	});

	it('do not exist for another organisation, and cannot be changed by a reader', async () => {
		const id = await make();
		const { draft, version } = await getCalculation(reader, id, db);
		const acts: ((m: Membership | null) => Promise<unknown>)[] = [
			(m) => saveDraft(m, id, { draft, baseVersion: version }, db),
			(m) => duplicateCalculation(m, id, db),
			(m) => deleteCalculation(m, id, db),
			(m) => restoreVersion(m, id, 1, db),
			(m) => createCalculation(m, dossierId, { title: 'x', kind: 'find-value' }, db)
		];
		for (const act of acts) {
			await expect(act(stranger)).rejects.toThrow(NotFoundError);
			await expect(act(null)).rejects.toThrow(NotFoundError);
			await expect(act(reader)).rejects.toThrow(ForbiddenError);
		}
		await expect(getCalculation(stranger, id, db)).rejects.toThrow(NotFoundError);
	});

	it('refuse evidence of another dossier', async () => {
		const id = await make();
		const { draft, version } = await getCalculation(author, id, db);
		const assumption = {
			value: '1',
			unit: '',
			spread: 'exact' as const,
			spreadValues: {},
			source: { kind: 'file' as const, text: '', evidenceId: '00000000-0000-4000-8000-000000000000' },
			note: ''
		};
		await expect(
			saveDraft(author, id, { draft: { ...draft, assumptions: { x: assumption } }, baseVersion: version }, db)
		).rejects.toThrow(NotFoundError);
	});
});
