import { randomBytes, X509Certificate } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { NotFoundError } from '../access/errors';
import type { Database } from '../db';
import { certificates, organisations } from '../db/schema';
import { testDatabase } from '../testing/db';
import { ensureAuthority, ensureOrganisationCertificate, organisationSigner, rootPem } from './authority';
import { pdfsig } from './testing/pdfsig';
import { signedSample } from './testing/signed-sample';

const keys = vi.hoisted(() => ({ SEALING_KEYS: '' }));
vi.mock('../env', () => ({ env: () => keys }));

let db: Database;
let drop: () => Promise<void>;

const newOrganisation = async (name: string): Promise<string> => {
	const [row] = await db.insert(organisations).values({ name, numberPrefix: 'TB' }).returning();
	return row?.id ?? '';
};

beforeAll(async () => {
	keys.SEALING_KEYS = `test:${randomBytes(32).toString('base64')}`;
	({ db, drop } = await testDatabase());
});

afterAll(() => drop());

describe('authority', () => {
	it('is made once by eight callers at a time', async () => {
		const made = await Promise.all(Array.from({ length: 8 }, () => ensureAuthority(db)));
		expect(new Set(made.map((m) => m.root.fingerprint)).size).toBe(1);
		expect(new Set(made.map((m) => m.issuing.fingerprint)).size).toBe(1);
		expect(await db.$count(certificates)).toBe(2);
	});

	it('gives one certificate to an organisation, asked by eight callers at a time', async () => {
		const organisationId = await newOrganisation('Tallis Brook Consulting');
		const ask = () => ensureOrganisationCertificate(db, organisationId);
		const made = await Promise.all(Array.from({ length: 8 }, ask));
		expect(new Set(made.map((m) => m.id)).size).toBe(1);
		expect(await db.$count(certificates, eq(certificates.organisationId, organisationId))).toBe(1);
	});

	it('makes certificates of the right shape', async () => {
		const organisationId = await newOrganisation('Idris Venn, "sole" consultant + son');
		const { root, issuing } = await ensureAuthority(db);
		const leaf = await ensureOrganisationCertificate(db, organisationId);
		const [r, i, l] = [root, issuing, leaf].map((c) => new X509Certificate(c.pem)) as [
			X509Certificate,
			X509Certificate,
			X509Certificate
		];
		expect([r.ca, i.ca, l.ca]).toEqual([true, true, false]);
		expect(r.verify(r.publicKey)).toBe(true);
		expect(i.checkIssued(r) && i.verify(r.publicKey)).toBe(true);
		expect(l.checkIssued(i) && l.verify(i.publicKey)).toBe(true);
		expect(l.verify(r.publicKey)).toBe(false);
		expect(l.toLegacyObject().subject.CN).toBe('Idris Venn, "sole" consultant + son');
		expect(Date.parse(l.validTo)).toBeLessThan(Date.parse(i.validTo));
	});

	it('makes certificates that hold for a report whose issue was asked for just before', async () => {
		const asked = Date.now() - 3_600_000;
		const organisationId = await newOrganisation('Made at first use');
		const { root, issuing } = await ensureAuthority(db);
		const leaf = await ensureOrganisationCertificate(db, organisationId);
		for (const { pem } of [root, issuing, leaf]) {
			expect(Date.parse(new X509Certificate(pem).validFrom)).toBeLessThan(asked);
		}
	});

	it('keeps no private key in the clear', async () => {
		for (const row of await db.select().from(certificates)) {
			expect(row.sealedKey).toMatch(/^v1\.test\./);
			expect(row.sealedKey).not.toContain('PRIVATE');
		}
	});

	it('signs a file that pdfsig finds valid, trusted and wholly signed', async () => {
		const organisationId = await newOrganisation('The Ferrow Courier');
		const { signer, certificateId } = await organisationSigner(db, organisationId);
		expect(certificateId).toBe((await ensureOrganisationCertificate(db, organisationId)).id);
		const report = pdfsig(await signedSample(signer), await rootPem(db));
		expect(report, report.text).toMatchObject({ valid: true, trusted: true, total: true, count: 1 });
		expect(report.text).toContain('Signer Certificate Common Name: The Ferrow Courier');
	});

	it('replaces a revoked certificate and keeps the old one', async () => {
		const organisationId = await newOrganisation('Marrow Coast Housing Trust');
		const old = await ensureOrganisationCertificate(db, organisationId);
		await db.update(certificates).set({ revokedAt: new Date() }).where(eq(certificates.id, old.id));
		const fresh = await ensureOrganisationCertificate(db, organisationId);
		expect(fresh.id).not.toBe(old.id);
		expect(await db.$count(certificates, eq(certificates.organisationId, organisationId))).toBe(2);
	});

	it('cannot sign once the sealing key is gone, and says which', async () => {
		const organisationId = await newOrganisation('Orrin Prospecting');
		await organisationSigner(db, organisationId);
		const kept = keys.SEALING_KEYS;
		keys.SEALING_KEYS = `other:${randomBytes(32).toString('base64')}`;
		await expect(organisationSigner(db, organisationId)).rejects.toThrow(/"test" is not listed/);
		keys.SEALING_KEYS = `${keys.SEALING_KEYS},${kept}`;
		await expect(organisationSigner(db, organisationId)).resolves.toBeDefined();
	});

	it('gives nothing to an organisation that does not exist', async () => {
		const nobody = '00000000-0000-4000-8000-000000000000';
		await expect(ensureOrganisationCertificate(db, nobody)).rejects.toBeInstanceOf(NotFoundError);
	});
});
