import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import fc from 'fast-check';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import {
	signedSample,
	testAuthority,
	unsignedSample,
	type TestAuthority
} from '../signing/testing/signed-sample';
import { verifyReport } from './verify-report';

vi.setConfig({ testTimeout: 30_000 });

const record = JSON.stringify({
	format: 'noonmark-record/1',
	report: { number: 'TB-0412', revision: 1, code: '8KQ2-7MTR' },
	records: []
});

let authority: TestAuthority;
let report: Buffer;

const verdictOf = async (pdf: Buffer): Promise<string> =>
	(await verifyReport(pdf, { rootPem: authority.root.pem })).verdict;

beforeAll(async () => {
	authority = await testAuthority();
	report = await signedSample(authority.signer, { record });
});

describe('what is no report', () => {
	it.each([
		['nothing at all', Buffer.alloc(0), 'unreadable'],
		['a picture', Buffer.from('89504e470d0a1a0a', 'hex'), 'not-a-report'],
		['words', Buffer.from('a report, honestly'), 'not-a-report'],
		['a PDF header alone', Buffer.from('%PDF-1.7\n'), 'unreadable']
	])('%s', async (_, bytes, verdict) => {
		expect(await verdictOf(bytes)).toBe(verdict);
	});

	it('an unsigned preview', async () => {
		expect(await verdictOf(await unsignedSample({ record, field: null }))).toBe('not-a-report');
	});

	it('a signed file without a record', async () => {
		expect(await verdictOf(await signedSample(authority.signer))).toBe('not-a-report');
	});

	it('a signature field that was never filled', async () => {
		expect(await verdictOf(await unsignedSample({ record }))).toBe('altered');
	});

	it('a file cut off anywhere', async () => {
		for (const share of [0.05, 0.3, 0.7, 0.97, 0.999]) {
			const cut = report.subarray(0, Math.floor(report.length * share));
			expect(await verdictOf(cut)).toMatch(/altered|unreadable/);
		}
	});

	it('a report behind leading garbage', async () => {
		expect(await verdictOf(Buffer.concat([Buffer.from('garbage\n'), report]))).toBe('altered');
	});

	it('an encrypted file', async () => {
		const pdf = await unsignedSample({
			record,
			field: null,
			pdfkit: { userPassword: 'a', ownerPassword: 'b' }
		});
		expect(await verdictOf(pdf)).toBe('unreadable');
	});

	it('a file of more than 25 MB, without reading it', async () => {
		const huge = Buffer.alloc(25 * 1024 * 1024 + 1);
		report.copy(huge);
		expect(await verdictOf(huge)).toBe('unreadable');
	});

	it('a file that another program saved anew', async () => {
		const folder = mkdtempSync(join(tmpdir(), 'qpdf-'));
		try {
			writeFileSync(join(folder, 'in.pdf'), report);
			for (const option of ['--object-streams=generate', '--linearize', '--qdf']) {
				spawnSync('qpdf', [option, 'in.pdf', 'out.pdf'], { cwd: folder });
				expect(await verdictOf(readFileSync(join(folder, 'out.pdf'))), option).toMatch(
					/altered|not-a-report/
				);
			}
			spawnSync(
				'qpdf',
				['--encrypt', '', 'b', '256', '--', '--object-streams=generate', 'in.pdf', 'out.pdf'],
				{ cwd: folder }
			);
			expect(await verdictOf(readFileSync(join(folder, 'out.pdf')))).toBe('unreadable');
		} finally {
			rmSync(folder, { recursive: true, force: true });
		}
	});
});

describe('hostile files', () => {
	it('end with a verdict in bounded time, whatever the bytes', async () => {
		await fc.assert(
			fc.asyncProperty(fc.uint8Array({ maxLength: 2000 }), async (noise) => {
				const bytes = Buffer.concat([Buffer.from('%PDF-1.7\n/ByteRange startxref\n9\n'), Buffer.from(noise)]);
				expect(await verdictOf(bytes)).toMatch(/altered|unreadable|not-a-report/);
			})
		);
	});

	it.each([
		['deep nesting', '['.repeat(100_000)],
		['many signatures', '/ByteRange '.repeat(100_000)],
		['a key twice', '<< /ByteRange [0 1 2 3] /ByteRange [0 1 2 3] /Contents <00> >> endobj'],
		['an escaped second key', '<< /ByteRange [0 1 2 3] /Byte#52ange [0 1 2 3] /Contents <00> >> endobj'],
		['a long string', `<< /ByteRange [0 1 2 3] /Contents <${'00'.repeat(3_000_000)}> >> endobj`]
	])('%s is refused', async (_, body) => {
		const pdf = Buffer.from(`%PDF-1.7\n1 0 obj\n<< /ByteRange ${body}\n1 0 obj ${body}\nstartxref\n0\n%%EOF`);
		const start = performance.now();
		expect(await verdictOf(pdf)).toBe('altered');
		expect(performance.now() - start).toBeLessThan(2000);
	});

	it('a record that unpacks without end is refused', async () => {
		const bomb = 'a'.repeat(17 * 1024 * 1024);
		const pdf = await signedSample(authority.signer, { record: bomb });
		expect(pdf.length).toBeLessThan(200_000);
		expect(await verdictOf(pdf)).toMatch(/altered|not-a-report/);
	});
});
