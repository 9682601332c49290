import { createHash } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { newDraft } from '$lib/calculation/new-draft';
import { emptyReportText } from '$lib/report/text';
import { emptyDossier } from '$lib/schemas/dossier';
import {
	ConflictError,
	ForbiddenError,
	InvalidInputError,
	NotFoundError,
	TooManyRequestsError
} from '../access/errors';
import type { Membership } from '../access/membership';
import type { Database } from '../db';
import { auditEvents, calculations, evidence, reports, runs } from '../db/schema';
import { createDossier } from '../dossiers/create';
import { deleteDossier } from '../dossiers/delete';
import { openDossier } from '../dossiers/show';
import { testDatabase } from '../testing/db';
import { smallPdf, smallPng } from '../testing/files';
import { member } from '../testing/members';
import { deletedEvidenceName, deleteEvidence, restoreEvidence } from './delete';
import { downloadEvidence } from './download';
import { organisationQuota } from './limits';
import { listEvidence } from './list';
import { uploadEvidence } from './upload';

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let reader: Membership;
let stranger: Membership;
let dossierId: string;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	author = await member(db, ['author']);
	reader = await member(db, ['reader'], author);
	stranger = await member(db, ['owner', 'author']);
	dossierId = await createDossier(author, { ...emptyDossier, title: 'Roofs' }, db);
});
afterAll(() => drop());

let made = 0;
const add = (name = 'sheet.pdf') =>
	uploadEvidence(author, dossierId, { name, bytes: smallPdf(`file ${++made}`) }, db);

/** A calculation whose emissivity comes from a file. */
function citing(id: string) {
	const draft = newDraft('find-value');
	const source = { kind: 'file' as const, text: 'page 2', evidenceId: id };
	const assumption = { value: '0.9', unit: '', spread: 'exact' as const, spreadValues: {}, source, note: '' };
	return { ...draft, assumptions: { emissivity: assumption } };
}

describe('evidence', () => {
	it('is kept byte for byte with its hash, listed and handed back as a download', async () => {
		const bytes = smallPng();
		const before = await openDossier(author, dossierId, db);
		const { id, sha256 } = await uploadEvidence(author, dossierId, { name: 'photo\u202Egnp.exe', bytes }, db);
		expect(sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
		const listed = await listEvidence(reader, dossierId, db);
		expect(listed.find((row) => row.id === id)).toMatchObject({
			fileName: 'photognp.exe.png',
			mediaType: 'image/png',
			size: bytes.length,
			sha256
		});
		expect(Object.keys(listed[0] ?? {})).not.toContain('content');

		const { content, headers } = await downloadEvidence(reader, id, db);
		expect(content.equals(bytes)).toBe(true);
		expect(headers).toMatchObject({
			'content-type': 'image/png',
			'content-disposition': `attachment; filename="photognp.exe.png"; filename*=UTF-8''photognp.exe.png`,
			'x-content-type-options': 'nosniff'
		});
		expect(headers['content-security-policy']).toMatch(/^sandbox;/);
		const after = await openDossier(author, dossierId, db);
		expect(after.updatedAt.getTime()).toBeGreaterThan(before.updatedAt.getTime());
		expect(after.version).toBe(before.version);
		const [event] = await db.select().from(auditEvents).where(eq(auditEvents.subject, id));
		expect(event).toMatchObject({ action: 'evidence.upload', userId: author.userId });
	});

	it('does not exist for another organisation', async () => {
		const { id } = await add();
		const file = { name: 'x.pdf', bytes: smallPdf('theirs') };
		await expect(uploadEvidence(stranger, dossierId, file, db)).rejects.toThrow(NotFoundError);
		await expect(downloadEvidence(stranger, id, db)).rejects.toThrow(NotFoundError);
		await expect(deleteEvidence(stranger, id, db)).rejects.toThrow(NotFoundError);
		await expect(downloadEvidence(null, id, db)).rejects.toThrow(NotFoundError);
		expect(await listEvidence(stranger, dossierId, db)).toEqual([]);
		await deleteEvidence(author, id, db);
		await expect(restoreEvidence(stranger, id, db)).rejects.toThrow(NotFoundError);
		expect(await deletedEvidenceName(stranger, id, db)).toBeUndefined();
	});

	it('may be read but not changed by a reader', async () => {
		const { id } = await add();
		const file = { name: 'x.pdf', bytes: smallPdf('reader') };
		await expect(uploadEvidence(reader, dossierId, file, db)).rejects.toThrow(ForbiddenError);
		await expect(deleteEvidence(reader, id, db)).rejects.toThrow(ForbiddenError);
		await expect(restoreEvidence(reader, id, db)).rejects.toThrow(ForbiddenError);
		expect((await downloadEvidence(reader, id, db)).content.length).toBeGreaterThan(0);
	});

	it('is deleted and brought back', async () => {
		const { id } = await add('gone.pdf');
		expect(await deleteEvidence(author, id, db)).toBe(dossierId);
		await expect(downloadEvidence(author, id, db)).rejects.toThrow(NotFoundError);
		await expect(deleteEvidence(author, id, db)).rejects.toThrow(NotFoundError);
		expect((await listEvidence(author, dossierId, db)).map((row) => row.id)).not.toContain(id);
		expect(await deletedEvidenceName(author, id, db)).toBe('gone.pdf');
		expect(await restoreEvidence(author, id, db)).toBe(dossierId);
		expect((await downloadEvidence(author, id, db)).headers['content-type']).toBe('application/pdf');
		await expect(restoreEvidence(author, id, db)).rejects.toThrow(NotFoundError);
	});

	it('stays while a calculation or a reported run rests on it', async () => {
		const { id } = await add();
		const [calculation] = await db
			.insert(calculations)
			.values({ organisationId: author.organisationId, dossierId, title: 'Roof, aged', draft: citing(id) })
			.returning({ id: calculations.id });
		const calculationId = calculation?.id ?? '';
		await expect(deleteEvidence(author, id, db)).rejects.toThrow(/Roof, aged/);

		await db
			.update(calculations)
			.set({ draft: newDraft('find-value') })
			.where(eq(calculations.id, calculationId));
		const [run] = await db
			.insert(runs)
			.values({
				organisationId: author.organisationId,
				calculationId,
				draft: citing(id),
				request: { method: 'effective-temperature', inputs: {} },
				state: 'done'
			})
			.returning({ id: runs.id });
		const [report] = await db
			.insert(reports)
			.values({
				organisationId: author.organisationId,
				dossierId,
				number: 'TB-0001',
				template: 'client-memo',
				title: 'Memo',
				text: emptyReportText,
				runIds: [run?.id ?? '']
			})
			.returning({ id: reports.id });
		await expect(deleteEvidence(author, id, db)).rejects.toThrow(ConflictError);
		await db.delete(reports).where(eq(reports.id, report?.id ?? ''));
		expect(await deleteEvidence(author, id, db)).toBe(dossierId);
	});

	it('is out of reach with its deleted dossier', async () => {
		const other = await createDossier(author, { ...emptyDossier, title: 'Short-lived' }, db);
		const { id } = await uploadEvidence(author, other, { name: 'a.pdf', bytes: smallPdf('short') }, db);
		await deleteDossier(author, other, db);
		await expect(downloadEvidence(author, id, db)).rejects.toThrow(NotFoundError);
		await expect(deleteEvidence(author, id, db)).rejects.toThrow(NotFoundError);
		await expect(uploadEvidence(author, other, { name: 'b.pdf', bytes: smallPdf('b') }, db)).rejects.toThrow(
			NotFoundError
		);
	});

	it('is refused where its content is wrong, or where it is there already', async () => {
		const page = { name: 'sheet.pdf', bytes: Buffer.from('<html>') };
		await expect(uploadEvidence(author, dossierId, page, db)).rejects.toThrow(InvalidInputError);
		const file = { name: 'twice.pdf', bytes: smallPdf('twice') };
		const both = await Promise.allSettled([
			uploadEvidence(author, dossierId, file, db),
			uploadEvidence(author, dossierId, { ...file, name: 'again.pdf' }, db)
		]);
		expect(both.map((one) => one.status).sort()).toEqual(['fulfilled', 'rejected']);
		const kept = (await listEvidence(author, dossierId, db)).filter(({ fileName }) =>
			/twice|again/.test(fileName)
		);
		expect(kept).toHaveLength(1);
	});

	it('fills its organisation’s room and not a byte more, however many come at once', async () => {
		const own = await member(db, ['author']);
		const full = await createDossier(own, { ...emptyDossier, title: 'Full' }, db);
		const size = smallPdf('n').length;
		// A row that claims nearly all the room; the sum counts sizes as they are stated.
		await db.insert(evidence).values({
			organisationId: own.organisationId,
			dossierId: full,
			fileName: 'large.pdf',
			mediaType: 'application/pdf',
			size: organisationQuota - 2 * size,
			sha256: '0'.repeat(64),
			content: Buffer.alloc(0),
			deletedAt: new Date()
		});
		const tries = await Promise.allSettled(
			['1', '2', '3', '4', '5'].map((text) =>
				uploadEvidence(own, full, { name: `${text}.pdf`, bytes: smallPdf(text) }, db)
			)
		);
		expect(tries.filter((one) => one.status === 'fulfilled')).toHaveLength(2);
		const refusal = tries.find((one) => one.status === 'rejected');
		expect(refusal?.reason).toBeInstanceOf(InvalidInputError);
		expect(String(refusal?.reason)).toMatch(/500 MB/);
	});

	it('comes in at a pace, refused tries counted, that one person cannot outrun and others do not feel', async () => {
		const hasty = await member(db, ['author']);
		const calm = await member(db, ['author'], hasty);
		const own = await createDossier(hasty, { ...emptyDossier, title: 'Hasty' }, db);
		const page = { name: 'x.pdf', bytes: Buffer.from('<html>') };
		// Twice the pace and one more: too many for one window even where the tries fall into two.
		const tries = await Promise.allSettled(
			Array.from({ length: 121 }, () => uploadEvidence(hasty, own, page, db))
		);
		const reasons = tries.map((one) => (one.status === 'rejected' ? (one.reason as unknown) : null));
		expect(reasons.some((reason) => reason instanceof InvalidInputError)).toBe(true);
		expect(reasons.some((reason) => reason instanceof TooManyRequestsError)).toBe(true);
		const sound = { name: 'y.pdf', bytes: smallPdf('hasty') };
		expect(await uploadEvidence(calm, own, sound, db)).toMatchObject({ id: expect.any(String) as string });
	});
});
