import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { emptyDossier } from '$lib/schemas/dossier';
import { createCalculation, deleteCalculation } from '../calculations/change';
import type { Database } from '../db';
import { createDossier } from '../dossiers/create';
import { createReport } from '../reports/change';
import { setTestEnvironment } from '../testing/environment';
import { testDatabase } from '../testing/db';
import { member } from '../testing/members';
import type { Membership } from './membership';
import { isInSight, isKindInSight } from './sight';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let stranger: Membership;
let billing: Membership;
const ids = { dossiers: '', calculations: '', reports: '' };
let elsewhere = '';

beforeAll(async () => {
	setTestEnvironment();
	({ db, drop } = await testDatabase());
	author = await member(db, ['author']);
	billing = await member(db, ['billing'], author);
	stranger = await member(db, ['author']);
	ids.dossiers = await createDossier(author, { ...emptyDossier, title: 'Roofs' }, db);
	elsewhere = await createDossier(author, { ...emptyDossier, title: 'Paving' }, db);
	ids.calculations = await createCalculation(
		author,
		ids.dossiers,
		{ title: 'Sheet', kind: 'find-value' },
		db
	);
	ids.reports = await createReport(author, ids.dossiers, { template: 'client-memo', runId: null }, db);
});
afterAll(() => drop());

const guestOf = (dossierId: string): Membership => ({
	...author,
	userId: stranger.userId,
	roles: ['guest'],
	onlyDossiers: [dossierId]
});

describe('what somebody may know to be there', () => {
	it.each(['dossiers', 'calculations', 'reports'] as const)('keeps to who reads %s', async (kind) => {
		const seenBy = (membership: Membership) => isInSight(membership, kind, ids[kind], db);
		expect(await seenBy(author)).toBe(true);
		expect(await seenBy(guestOf(ids.dossiers))).toBe(true);
		expect(await seenBy(guestOf(elsewhere))).toBe(false);
		expect(await seenBy(stranger)).toBe(false);
		expect(await seenBy(billing)).toBe(false);
	});

	it('holds what was put away, since it can be brought back', async () => {
		await deleteCalculation(author, ids.calculations, db);
		expect(await isInSight(author, 'calculations', ids.calculations, db)).toBe(true);
	});

	it('is of three kinds, whatever an object inherits', () => {
		expect(isKindInSight('reports')).toBe(true);
		expect(isKindInSight('evidence')).toBe(false);
		expect(isKindInSight('toString')).toBe(false);
	});
});
