import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { pdfsig } from './testing/pdfsig';
import { signedSample, testAuthority, unsignedSample, type TestAuthority } from './testing/signed-sample';
import { signPdf } from './sign';

let authority: TestAuthority;

beforeAll(async () => {
	authority = await testAuthority();
});

const contents = (pdf: Buffer): { start: number; end: number; cms: Buffer } => {
	const range = /\/ByteRange \[0 (\d+) (\d+) \d+\]/.exec(pdf.toString('latin1'));
	const [start, end] = [Number(range?.[1]), Number(range?.[2])];
	return { start, end, cms: Buffer.from(pdf.toString('latin1', start + 1, end - 1), 'hex') };
};

describe('signing', () => {
	it.each([false, true])(
		'gives a file that pdfsig finds valid, trusted and wholly signed (visible: %s)',
		async (visible) => {
			const pdf = await signedSample(authority.signer, { visible, record: '{}' });
			const report = pdfsig(pdf, authority.root.pem);
			expect(report, report.text).toMatchObject({ valid: true, trusted: true, total: true, count: 1 });
			expect(report.text).toContain('ETSI.CAdES.detached');
		}
	);

	it('passes openssl cms -verify with CAdES checks', async () => {
		const pdf = await signedSample(authority.signer);
		const { start, end, cms } = contents(pdf);
		const folder = mkdtempSync(join(tmpdir(), 'cms-'));
		try {
			const file = (name: string, bytes: string | Uint8Array): string => {
				writeFileSync(join(folder, name), bytes);
				return join(folder, name);
			};
			const covered = Buffer.concat([pdf.subarray(0, start), pdf.subarray(end)]);
			const run = (content: string): Buffer =>
				execFileSync(
					'openssl',
					['cms', '-verify', '-cades', '-binary', '-inform', 'DER', '-in', file('cms.der', cms)]
						.concat(['-content', content, '-CAfile', file('root.pem', authority.root.pem)])
						.concat(['-purpose', 'any']),
					{ stdio: ['ignore', 'pipe', 'pipe'] }
				);
			expect(run(file('covered', covered)).equals(covered)).toBe(true);
			covered.writeUInt8(covered.readUInt8(100) ^ 1, 100);
			expect(() => run(file('altered', covered))).toThrow(/verification failure/);
		} finally {
			rmSync(folder, { recursive: true, force: true });
		}
	});

	it('keeps the length, and differs from the unsigned file only in ByteRange and Contents', async () => {
		const unsigned = await unsignedSample({ record: '{}' });
		const signed = await signPdf(unsigned, authority.signer);
		const { start, end } = contents(signed);
		expect(signed).toHaveLength(unsigned.length);
		expect(signed.subarray(end).equals(unsigned.subarray(end))).toBe(true);
		const blank = (bytes: Buffer) => bytes.toString('latin1', 0, start).replace(/\/ByteRange \[.{35}/, '');
		expect(blank(signed)).toBe(blank(unsigned));
	});

	it('refuses a document without a field, and one whose field is too small', async () => {
		await expect(signPdf(await unsignedSample({ field: null }), authority.signer)).rejects.toThrow(
			/no signature field/
		);
		await expect(
			signPdf(await unsignedSample({ field: { reserve: 512 } }), authority.signer)
		).rejects.toThrow(/512 free/);
	});

	it('renders the same bytes twice before signing', async () => {
		const signedAt = new Date('2026-11-19T14:06:31Z');
		const [one, two] = [
			await unsignedSample({ field: { signedAt } }),
			await unsignedSample({ field: { signedAt } })
		];
		expect(one.equals(two)).toBe(true);
	});
});
