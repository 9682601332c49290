import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** What poppler's `pdfsig` says of a file, line by line; its exit code is no verdict. */
export interface PdfsigReport {
	valid: boolean;
	trusted: boolean;
	total: boolean;
	count: number;
	text: string;
}

/** Runs `pdfsig` with an NSS database that trusts the given root and nothing else. */
export function pdfsig(pdf: Uint8Array, rootPem: string): PdfsigReport {
	const folder = mkdtempSync(join(tmpdir(), 'pdfsig-'));
	try {
		writeFileSync(join(folder, 'file.pdf'), pdf);
		writeFileSync(join(folder, 'root.pem'), rootPem);
		const nss = `sql:${folder}`;
		execFileSync('certutil', ['-N', '-d', nss, '--empty-password']);
		const add = ['-A', '-d', nss, '-n', 'root', '-t', 'C,C,C', '-i', join(folder, 'root.pem')];
		execFileSync('certutil', add);
		const run = spawnSync('pdfsig', ['-nssdir', nss, join(folder, 'file.pdf')], { encoding: 'utf8' });
		if (run.error) throw run.error;
		const text = run.stdout + run.stderr;
		return {
			valid: text.includes('Signature Validation: Signature is Valid.'),
			trusted: text.includes('Certificate Validation: Certificate is Trusted.'),
			total: text.includes('- Total document signed') && !text.includes('Not total document signed'),
			count: text.match(/^Signature #\d+:/gm)?.length ?? 0,
			text
		};
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
}
