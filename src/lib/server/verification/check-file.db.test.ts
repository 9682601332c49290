import { createHash, randomBytes, X509Certificate } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { emptyReportText } from '../../report/text';
import { InvalidInputError, NotFoundError, TooManyRequestsError } from '../access/errors';
import type { Database } from '../db';
import { certificates, dossiers, issues, organisations, reports } from '../db/schema';
import { organisationSigner } from '../signing/authority';
import { signedSample } from '../signing/testing/signed-sample';
import { testDatabase } from '../testing/db';
import { checkFile, lookUpCode } from './check-file';
import { describeCheck } from './describe-check';
import { findByCode, findKnownFile } from './known';
import { publishedRoot } from './published-root';

const keys = vi.hoisted(() => ({ SEALING_KEYS: '' }));
vi.mock('../env', () => ({ env: () => keys }));

let db: Database;
let drop: () => Promise<void>;
let organisationId: string;
let dossierId: string;
const address = '192.0.2.7';
const sha256 = (bytes: Buffer): string => createHash('sha256').update(bytes).digest('hex');
const upload = (bytes: Buffer): File =>
	new File([Uint8Array.from(bytes)], 'report.pdf', { type: 'application/pdf' });

/** Signs, and puts into the ledger, a report without calculations. */
async function issue(revision: number, code: string): Promise<{ pdf: Buffer; reportId: string }> {
	const { signer, certificateId } = await organisationSigner(db, organisationId);
	const record = { format: 'noonmark-record/1', report: { number: 'TB-0412', revision, code }, records: [] };
	const pdf = await signedSample(signer, { record: JSON.stringify(record) });
	const [report] = await db
		.insert(reports)
		.values({
			organisationId,
			dossierId,
			number: 'TB-0412',
			revision,
			template: 'client-memo',
			title: 'Confidential title',
			text: emptyReportText,
			state: 'issued'
		})
		.returning();
	const reportId = report?.id ?? '';
	await db.insert(issues).values({
		organisationId,
		reportId,
		revision,
		code,
		state: 'done',
		model: { secret: 'Confidential model' },
		pdf,
		sha256: sha256(pdf),
		size: pdf.length,
		certificateId,
		issuedAt: new Date()
	});
	return { pdf, reportId };
}

beforeAll(async () => {
	keys.SEALING_KEYS = `test:${randomBytes(32).toString('base64')}`;
	({ db, drop } = await testDatabase());
	const [organisation] = await db
		.insert(organisations)
		.values({ name: 'Tallis Brook Consulting', numberPrefix: 'TB' })
		.returning();
	organisationId = organisation?.id ?? '';
	const [dossier] = await db
		.insert(dossiers)
		.values({ organisationId, title: 'Confidential dossier' })
		.returning();
	dossierId = dossier?.id ?? '';
});

afterAll(() => drop());

describe('an issued report', () => {
	let first: Awaited<ReturnType<typeof issue>>;

	beforeAll(async () => {
		first = await issue(1, '8KQ2-7MTR');
	});

	it('is genuine, known and current', async () => {
		const check = await checkFile(upload(first.pdf), address, undefined, db);
		expect(check.result.verdict).toBe('genuine');
		expect(check.known).toMatchObject({ number: 'TB-0412', revision: 1, state: 'issued', replacedBy: null });
		const view = describeCheck(check);
		expect(view).toMatchObject({
			heading: 'Genuine and unchanged.',
			subject: 'TB-0412 revision 1',
			good: true
		});
		expect(view.rows.map((row) => row.id)).toEqual(['signature', 'time', 'coverage', 'revision', 'record']);
	});

	it('says nothing of its content', async () => {
		const known = await findByCode('8kq27mtr', db);
		expect(JSON.stringify(known)).not.toMatch(/confidential/i);
		expect(known).toEqual(await findKnownFile(sha256(first.pdf), db));
	});

	it('is told from another by the code that the reader came with', async () => {
		const other = await issue(7, 'BBBB-2222');
		const check = await checkFile(upload(other.pdf), address, '8KQ2-7MTR', db);
		expect(check.otherReport).toBe(true);
		expect(describeCheck(check).heading).toContain('not the report of this code');
		await db.delete(reports).where(eq(reports.id, other.reportId));
	});

	it('is no longer known after a byte was changed', async () => {
		const changed = Buffer.from(first.pdf);
		changed.write('X', changed.indexOf('Sample memo'), 'latin1');
		const check = await checkFile(upload(changed), address, undefined, db);
		expect(check).toMatchObject({ known: null, identity: null, result: { verdict: 'altered' } });
		expect(describeCheck(check)).toMatchObject({ good: false, subject: '', decisive: 'coverage' });
	});

	it('is signed but not in the ledger where no issue is recorded', async () => {
		const { signer } = await organisationSigner(db, organisationId);
		const report = { number: 'TB-0999', revision: 1, code: 'ZZZZ-9999' };
		const record = JSON.stringify({ format: 'noonmark-record/1', report, records: [] });
		const check = await checkFile(upload(await signedSample(signer, { record })), address, undefined, db);
		expect(check).toMatchObject({ known: null, result: { verdict: 'genuine' } });
		expect(describeCheck(check)).toMatchObject({ good: false });
		expect(describeCheck(check).heading).toContain('not in its ledger');
	});

	it('is replaced by a later revision, and says which', async () => {
		await issue(2, '9CCC-3333');
		const check = await checkFile(upload(first.pdf), address, undefined, db);
		expect(check.known).toMatchObject({
			state: 'superseded',
			replacedBy: { revision: 2, code: '9CCC-3333' }
		});
		const view = describeCheck(check);
		expect(view.heading).toBe('Genuine and unchanged, but replaced by revision 2.');
		expect(view.rows[3]?.link?.href).toBe('/verify/9CCC-3333');
		expect(view.good).toBe(false);
	});

	it('is withdrawn where its organisation withdrew it', async () => {
		await db.update(reports).set({ state: 'withdrawn' }).where(eq(reports.id, first.reportId));
		expect(await findByCode('8KQ2-7MTR', db)).toMatchObject({ state: 'withdrawn' });
	});

	it('shows that its certificate was revoked', async () => {
		await db.update(certificates).set({ revokedAt: new Date() }).where(eq(certificates.kind, 'organisation'));
		const check = await checkFile(upload(first.pdf), address, undefined, db);
		expect(check.known?.certificateRevokedAt).toBeInstanceOf(Date);
		expect(describeCheck(check).good).toBe(false);
	});
});

describe('the form', () => {
	it.each([
		['no file', null],
		['a text', 'report.pdf'],
		['the empty choice of a browser', new File([], '')],
		['more than 25 MB', new File([new Uint8Array(25 * 1024 * 1024 + 1)], 'a.pdf')]
	])('refuses %s at the field', async (_, file) => {
		const work = checkFile(file, '192.0.2.8', undefined, db);
		await expect(work).rejects.toBeInstanceOf(InvalidInputError);
	});

	it('does not know a code that was never issued, nor one that is none', async () => {
		await expect(lookUpCode('ABCD-2345', '192.0.2.9', db)).rejects.toBeInstanceOf(NotFoundError);
		await expect(lookUpCode("' or 1=1", '192.0.2.9', db)).rejects.toBeInstanceOf(NotFoundError);
	});

	it('slows down whoever tries codes', async () => {
		const tries = Array.from({ length: 61 }, () => lookUpCode('ABCD-2345', '192.0.2.10', db));
		const outcomes = await Promise.allSettled(tries);
		const refused = outcomes.filter(
			(o) => o.status === 'rejected' && o.reason instanceof TooManyRequestsError
		);
		expect(refused).toHaveLength(1);
	});
});

describe('the published root', () => {
	it('is a certificate without its key', async () => {
		const { pem, fingerprint } = await publishedRoot(db);
		expect(pem).not.toContain('PRIVATE');
		expect(new X509Certificate(pem).fingerprint256.replaceAll(':', '').toLowerCase()).toBe(fingerprint);
	});
});
