import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import fc from 'fast-check';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { issueCertificate, localSigner } from '../signing/certificates';
import { pdfsig } from '../signing/testing/pdfsig';
import {
	signedSample,
	testAuthority,
	unsignedSample,
	type SampleOptions,
	type TestAuthority
} from '../signing/testing/signed-sample';
import {
	appendRevision,
	appendSignature,
	cmsOf,
	flip,
	rangeOf,
	replacePageText,
	withCms,
	withRange,
	wrapGap
} from './testing/attacks';
import { checkCms } from './cms';
import { verifyReport, type VerificationOptions } from './verify-report';

// Programs are started and keys made: a loaded machine takes its time.
vi.setConfig({ testTimeout: 30_000 });

// The engine has tests of its own, and record.test.ts runs it; here the file around the record is at stake.
const recompute = vi.hoisted(() => vi.fn());
vi.mock('../../record', () => ({ recompute }));

const record = JSON.stringify({
	format: 'noonmark-record/1',
	report: { number: 'TB-0412', revision: 1, code: '8KQ2-7MTR' },
	records: [{ request: {}, result: { evaluation: { trials: 200_000 } } }]
});

let authority: TestAuthority;
let report: Buffer;
let root: string;

const sign = (options: SampleOptions = {}): Promise<Buffer> =>
	signedSample(authority.signer, { record, ...options });
const verdictOf = async (pdf: Buffer, options: VerificationOptions = { rootPem: root }): Promise<string> =>
	(await verifyReport(pdf, options)).verdict;

beforeAll(async () => {
	recompute.mockResolvedValue({ recomputed: true, figures: 14, differences: [] });
	authority = await testAuthority();
	root = authority.root.pem;
	report = await sign({ field: { signedAt: new Date(Date.now() - 3_600_000) } });
});

describe('a report as issued', () => {
	it('is genuine, with everything that the verdict rests on', async () => {
		const result = await verifyReport(report, { rootPem: root });
		expect(result).toMatchObject({
			verdict: 'genuine',
			signature: {
				valid: true,
				level: 'PAdES B-B',
				signer: 'Tallis Brook Consulting',
				certificate: authority.organisation.fingerprint,
				issuer: 'trusted'
			},
			timestamp: { source: 'signer' },
			coverage: 'whole',
			record: { recomputed: true, figures: 14, differences: [] }
		});
		expect(result.reasons.join(' ')).toContain('only claimed by the signer');
		const seen = pdfsig(report, root);
		expect(seen).toMatchObject({ valid: true, trusted: true, total: true });
	});

	it('is intact, issuer unchecked, without a root', async () => {
		const result = await verifyReport(report);
		expect(result).toMatchObject({
			verdict: 'intact-issuer-unchecked',
			signature: { issuer: 'not-checked' }
		});
	});

	it('is found genuine with one of several roots', async () => {
		const other = await testAuthority('Another');
		expect(await verdictOf(report, { rootPem: other.root.pem + '\n' + root })).toBe('genuine');
	});

	it('stays genuine after the certificate has ended, judged at the time of signing', async () => {
		expect(await verdictOf(report, { rootPem: root, now: new Date('2090-01-01') })).toBe('genuine');
	});

	it('is genuine when signed with RSA', async () => {
		const rsa = await rsaSigner();
		const pdf = await signedSample(rsa.signer, { record });
		expect(await verdictOf(pdf, { rootPem: rsa.rootPem })).toBe('genuine');
		expect(pdfsig(pdf, rsa.rootPem)).toMatchObject({ valid: true, trusted: true, total: true });
	}, 60_000);

	it('differs where the record does not compute', async () => {
		const difference = { path: '/outputs/a/value', stored: 1, recomputed: 2 };
		recompute.mockResolvedValueOnce({ recomputed: false, figures: 14, differences: [difference] });
		const result = await verifyReport(report, { rootPem: root });
		expect(result.verdict).toBe('record-differs');
		expect(result.record?.differences[0]?.path).toBe('/records/0/result/outputs/a/value');
	});

	it('is not recomputed for a stranger, nor beyond the given number of trials', async () => {
		recompute.mockClear();
		expect((await verifyReport(report, { onlyTrusted: true })).record).toBeNull();
		const result = await verifyReport(report, { rootPem: root, maxTrials: 100_000 });
		expect(result).toMatchObject({ verdict: 'genuine', record: { recomputed: false } });
		expect(result.reasons.join(' ')).toContain('200000 trials');
		expect(recompute).not.toHaveBeenCalled();
	});
});

/** An RSA-3072 key under an RSA-2048 root, made by openssl so that nothing of our own certificate code is in it. */
async function rsaSigner(): Promise<{ signer: TestAuthority['signer']; rootPem: string }> {
	const folder = mkdtempSync(join(tmpdir(), 'rsa-'));
	try {
		const run = (...args: string[]): void => {
			const done = spawnSync('openssl', args, { cwd: folder, encoding: 'utf8' });
			if (done.status !== 0) throw new Error(done.stderr);
		};
		writeFileSync(
			join(folder, 'leaf.ext'),
			'basicConstraints=critical,CA:FALSE\nkeyUsage=critical,digitalSignature,nonRepudiation\n'
		);
		const days = ['-nodes', '-days', '30'];
		const usage = ['-addext', 'keyUsage=critical,keyCertSign'];
		run(
			'req',
			'-x509',
			'-newkey',
			'rsa:2048',
			...days,
			...usage,
			'-keyout',
			'root.key',
			'-out',
			'root.pem',
			'-subj',
			'/CN=RSA root'
		);
		run(
			'req',
			'-newkey',
			'rsa:3072',
			'-nodes',
			'-keyout',
			'leaf.key',
			'-out',
			'leaf.csr',
			'-subj',
			'/CN=RSA leaf'
		);
		run(
			'x509',
			'-req',
			'-in',
			'leaf.csr',
			'-CA',
			'root.pem',
			'-CAkey',
			'root.key',
			'-CAcreateserial',
			'-days',
			'30',
			'-extfile',
			'leaf.ext',
			'-outform',
			'DER',
			'-out',
			'leaf.der'
		);
		run('pkcs8', '-topk8', '-nocrypt', '-in', 'leaf.key', '-outform', 'DER', '-out', 'leaf.p8');
		const read = (name: string): Buffer => readFileSync(join(folder, name));
		// openssl starts the validity now; the sample is signed a moment later.
		await new Promise((resolve) => setTimeout(resolve, 1100));
		return {
			signer: localSigner(read('leaf.der'), read('leaf.p8'), []),
			rootPem: read('root.pem').toString()
		};
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
}

describe('changed bytes', () => {
	it('are found wherever they are, as pdfsig finds them in the signed part', async () => {
		const at = report.indexOf('Sample memo');
		expect(await verdictOf(flip(report, at))).toBe('altered');
		expect(pdfsig(flip(report, at), root).valid).toBe(false);
	});

	it('never pass, for any byte of the file and any bit of it', async () => {
		await fc.assert(
			fc.asyncProperty(
				fc.integer({ min: 0, max: report.length - 1 }),
				fc.integer({ min: 0, max: 7 }),
				async (at, bit) => {
					const result = await verifyReport(flip(report, at, 1 << bit));
					expect(result.verdict, `byte ${String(at)}`).not.toMatch(/genuine|intact/);
					expect(result.signature?.valid ?? false).toBe(false);
				}
			),
			{ numRuns: 250 }
		);
	}, 60_000);

	it('never pass, for any byte of the signature itself', () => {
		const cms = cmsOf(report);
		const { gapStart, gapEnd } = rangeOf(report);
		const covered = Buffer.concat([report.subarray(0, gapStart), report.subarray(gapEnd)]);
		const digest = createHash('sha256').update(covered).digest();
		expect(checkCms(cms, digest)).toMatchObject({ digestMatches: true, faults: [] });
		// Bit 5 turns small letters into capitals, which some comparisons overlook; the others take turns.
		for (let at = 0; at < cms.length; at += 2) {
			const bit = at % 4 === 0 ? 5 : (at / 2) % 8;
			const { faults, digestMatches } = checkCms(flip(cms, at, 1 << bit), digest);
			expect(digestMatches && faults.length === 0, `bit ${String(bit)} of byte ${String(at)}`).toBe(false);
		}
	}, 60_000);

	it('never pass in the name of the issuer that the signature states', async () => {
		const cms = cmsOf(report);
		const stated = cms.lastIndexOf('Noonmark Issuing');
		for (let at = stated; at < stated + 8; at++) {
			expect(await verdictOf(withCms(report, flip(cms, at, 0x20)))).toBe('altered');
		}
	});

	it('are named where they stand in the certificates', async () => {
		const cms = cmsOf(report);
		const at = cms.indexOf(authority.organisation.der) + 200;
		const result = await verifyReport(withCms(report, flip(cms, at)), { rootPem: root });
		expect(result.verdict).toBe('altered');
		expect(result.reasons[0]).toMatch(/certificate in the file/);
	});

	it('are named where they stand behind the signature', async () => {
		const { gapEnd } = rangeOf(report);
		const padded = Buffer.from(report);
		padded.write('ab', gapEnd - 3, 'latin1');
		const result = await verifyReport(padded, { rootPem: root });
		expect(result.verdict).toBe('altered');
		expect(result.reasons[0]).toMatch(/unused room/);
	});

	it('count even where they mean the same: capital hexadecimal digits', async () => {
		const { gapStart } = rangeOf(report);
		const at = report.toString('latin1').slice(gapStart).search(/[a-f]/) + gapStart;
		expect(await verdictOf(flip(report, at, 0x20))).toBe('altered');
	});
});

describe('coverage', () => {
	it('is partial once a revision with another number was appended; pdfsig still calls it valid', async () => {
		const forged = replacePageText(report, 'The sunlit mean is +38.0 degC.');
		const result = await verifyReport(forged, { rootPem: root });
		expect(result).toMatchObject({ verdict: 'extended', coverage: 'partial', signature: { valid: true } });
		expect(pdfsig(forged, root)).toMatchObject({ valid: true, trusted: true, total: false });
	});

	it.each([
		['one line feed', '\n'],
		['a comment', '% note\n']
	])('is partial after %s', async (_, text) => {
		expect(await verdictOf(Buffer.concat([report, Buffer.from(text)]))).toBe('extended');
	});

	it('is partial with a second signature, and says so', async () => {
		const result = await verifyReport(appendSignature(report), { rootPem: root });
		expect(result.verdict).toBe('extended');
		expect(result.reasons.join(' ')).toContain('Another signature');
	});

	it('refuses a gap that is wider than the signature, though the hashed bytes are the same', async () => {
		const forged = wrapGap(report);
		const result = await verifyReport(forged, { rootPem: root });
		expect(result.verdict).toBe('altered');
		expect(result.reasons.join(' ')).toMatch(/not exactly the signature itself/);
	});

	it('refuses every ByteRange that is off by one', async () => {
		const { gapStart, gapEnd } = rangeOf(report);
		const right = [0, gapStart, gapEnd, report.length - gapEnd];
		for (const [place, step] of [0, 1, 2, 3].flatMap(
			(p) =>
				[
					[p, 1],
					[p, -1]
				] as const
		)) {
			const numbers = right.map((n, i) => (i === place ? n + step : n));
			expect(await verdictOf(withRange(report, numbers)), numbers.join(' ')).toBe('altered');
		}
	});

	it('refuses a signature over a file that was itself added to', async () => {
		const unsigned = await unsignedSample({ record });
		const catalog = /\/Root (\d+) 0 R/.exec(unsigned.toString('latin1'))?.[1];
		expect(catalog).toBeDefined();
		const { signPdf } = await import('../signing/sign');
		const pdf = await signPdf(appendRevision(unsigned, 9999, 'null'), authority.signer);
		expect(pdfsig(pdf, root)).toMatchObject({ valid: true, total: true });
		expect(await verdictOf(pdf)).toBe('altered');
	});
});

describe('issuer', () => {
	it('is unknown for another authority of the same name', async () => {
		const other = await testAuthority();
		const pdf = await signedSample(other.signer, { record });
		expect(await verdictOf(pdf)).toBe('issuer-unknown');
		expect(pdfsig(pdf, root)).toMatchObject({ valid: true, trusted: false });
	});

	it('is unknown where the certificate was not valid at the time of signing', async () => {
		const signedAt = new Date(Date.now() - 3 * 86_400_000);
		expect(await verdictOf(await sign({ field: { signedAt } }))).toBe('issuer-unknown');
	});

	it('is unknown where the signature claims a time to come', async () => {
		const signedAt = new Date(Date.now() + 3 * 86_400_000);
		const result = await verifyReport(await sign({ field: { signedAt } }), { rootPem: root });
		expect(result.verdict).toBe('issuer-unknown');
		expect(result.reasons.join(' ')).toContain('not come yet');
	});

	it('is unknown where an organisation issued a certificate itself', async () => {
		const names = { commonName: 'Orrin Prospecting', organisation: 'Orrin Prospecting' };
		const { issuing, organisation } = authority;
		const forged = await issueCertificate('organisation', names, new Date(Date.now() - 60_000), organisation);
		const signer = localSigner(forged.der, forged.privateKey, [organisation.der, issuing.der]);
		expect(await verdictOf(await signedSample(signer, { record }))).toBe('issuer-unknown');
	});

	it('is unknown where the signing certificate is an authority', async () => {
		const { issuing } = authority;
		const pdf = await signedSample(localSigner(issuing.der, issuing.privateKey, []), { record });
		expect(await verdictOf(pdf)).toBe('issuer-unknown');
	});

	it('refuses a root file without a certificate', async () => {
		await expect(verifyReport(report, { rootPem: 'nothing' })).rejects.toThrow(/no certificate/);
	});
});
