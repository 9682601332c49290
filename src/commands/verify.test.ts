import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, truncateSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { signedSample, testAuthority } from '../lib/server/signing/testing/signed-sample';
import { flip, replacePageText } from '../lib/server/verification/testing/attacks';

// Programs are started and keys made: a loaded machine takes its time.
vi.setConfig({ testTimeout: 30_000 });

const folder = mkdtempSync(join(tmpdir(), 'verify-'));
const place = (name: string): string => join(folder, name);

interface Run {
	code: number | null;
	out: string;
	err: string;
	verdict: string | undefined;
}

/** The command as a reader runs it, without a database in the environment. */
function run(...args: string[]): Run {
	const { status, stdout, stderr } = spawnSync(process.execPath, ['scripts/verify.mjs', ...args], {
		encoding: 'utf8',
		env: { PATH: process.env.PATH }
	});
	const verdict = stdout === '' ? undefined : (JSON.parse(stdout) as { verdict: string }).verdict;
	return { code: status, out: stdout, err: stderr, verdict };
}

beforeAll(async () => {
	const [authority, other] = [await testAuthority(), await testAuthority()];
	const report = { number: 'TB-0412', revision: 1, code: '8KQ2-7MTR' };
	const record = JSON.stringify({ format: 'noonmark-record/1', report, records: [] });
	const pdf = await signedSample(authority.signer, { record });
	writeFileSync(place('report.pdf'), pdf);
	writeFileSync(place('root.pem'), authority.root.pem);
	writeFileSync(place('other.pem'), other.root.pem);
	writeFileSync(place('altered.pdf'), flip(pdf, pdf.indexOf('Sample memo')));
	writeFileSync(place('extended.pdf'), replacePageText(pdf, 'another number'));
	writeFileSync(place('words.txt'), 'no certificate');
	writeFileSync(place('empty.pdf'), '');
	writeFileSync(place('huge.pdf'), pdf);
	truncateSync(place('huge.pdf'), 500 * 1024 * 1024);
	// Bundles first, so that no single test below pays for it.
	run();
}, 120_000);

afterAll(() => {
	rmSync(folder, { recursive: true, force: true });
});

describe('verify', () => {
	it.each([
		['genuine', 0, ['report.pdf', 'root.pem']],
		['intact-issuer-unchecked', 0, ['report.pdf']],
		['issuer-unknown', 1, ['report.pdf', 'other.pem']],
		['altered', 1, ['altered.pdf', 'root.pem']],
		['extended', 1, ['extended.pdf', 'root.pem']],
		['not-a-report', 1, ['words.txt']],
		['unreadable', 1, ['empty.pdf']],
		['unreadable', 1, ['huge.pdf']]
	] as const)('says %s and exits %i', (verdict, code, [file, root]) => {
		const done = run(place(file), ...(root === undefined ? [] : ['--root', place(root)]));
		expect(done, done.err).toMatchObject({ verdict, code, err: '' });
	});

	it('prints one object with exactly the published keys', () => {
		const { out } = run(place('report.pdf'));
		const keys = ['verdict', 'signature', 'timestamp', 'coverage', 'record', 'reasons'];
		expect(Object.keys(JSON.parse(out) as object)).toEqual(keys);
	});

	it.each([
		['no file', []],
		['two files', [place('report.pdf'), place('report.pdf')]],
		['an unknown option', [place('report.pdf'), '--trust-me']],
		['a file that is not there', [place('nowhere.pdf')]],
		['a folder', [folder]],
		['a root that is not there', [place('report.pdf'), '--root', place('nowhere.pem')]],
		['a root without a certificate', [place('report.pdf'), '--root', place('words.txt')]]
	])('exits 2 with nothing on standard output for %s', (_, args) => {
		const done = run(...args);
		expect(done).toMatchObject({ code: 2, out: '' });
		expect(done.err).not.toBe('');
		expect(done.err).not.toContain('    at ');
	});
});
