import { execFileSync, spawnSync } from 'node:child_process';
import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { compute } from '../../src/lib/calculation';
import { methodById } from '../../src/lib/methods';
import { buildReportModel, unmetDuties, type ReportModel } from '../../src/lib/report';
import { renderReport } from '../../src/lib/server/reports/render';
import { signPdf } from '../../src/lib/server/signing/sign';
import { issueCertificate, localSigner } from '../../src/lib/server/signing/certificates';
import type { Signer } from '../../src/lib/server/signing/cms';
import { samples } from '../../report-templates/client-memo/sample';

const signedAt = new Date('2026-11-28T09:30:00Z');

/** Pictures of every page, where the tool that draws them is installed. */
function pictures(file: string): boolean {
	if (spawnSync('pdftoppm', ['-v']).error) return false;
	execFileSync('pdftoppm', ['-r', '100', '-png', file, file.replace(/\.pdf$/, '')]);
	return true;
}

async function issued(model: ReportModel, signer: Signer): Promise<Buffer> {
	const unsigned = await renderReport(model, {
		signature: {
			name: model.organisation.name,
			reason: `Issue of ${model.number}, revision ${model.revision}`,
			time: signedAt
		}
	});
	return signPdf(unsigned, signer);
}

/**
 * Writes one signed PDF for each sample (or for those named), one draft, and the root certificate of the throwaway
 * authority that signed them.
 * @returns lines for the terminal
 */
export async function writeSamples(folder: string, names: readonly string[]): Promise<string[]> {
	rmSync(folder, { recursive: true, force: true });
	mkdirSync(folder, { recursive: true });
	const from = new Date(signedAt.getTime() - 86_400_000);
	const service = (commonName: string) => ({ commonName, organisation: 'Noonmark' });
	const root = await issueCertificate('root', service('Noonmark Sample Root'), from);
	const issuing = await issueCertificate('issuing', service('Noonmark Sample Issuing'), from, root);
	const lines: string[] = [];
	writeFileSync(join(folder, 'root.pem'), root.pem);
	for (const [name, sample] of Object.entries(samples)) {
		if (names.length > 0 && !names.includes(name)) continue;
		const source = await sample({ compute, methodOf: methodById });
		if (source.verification) source.verification.rootFingerprint = root.fingerprint;
		const model = buildReportModel(source, { methodOf: methodById });
		const { name: organisation } = model.organisation;
		const own = await issueCertificate(
			'organisation',
			{ commonName: organisation, organisation },
			from,
			issuing
		);
		const signer = localSigner(own.der, own.privateKey, [issuing.der]);
		const unmet = unmetDuties(model);
		if (unmet.length > 0) lines.push(`${name}: ${unmet.map((duty) => duty.message).join(' ')}`);
		const file = join(folder, `client-memo-${name}.pdf`);
		writeFileSync(file, await issued(model, signer));
		lines.push(file);
		if (!pictures(file)) lines.push('pdftoppm is missing: no pictures. apt-get install poppler-utils');
		if (name === 'value') {
			const draft = join(folder, 'client-memo-draft.pdf');
			writeFileSync(draft, await renderReport(model, { watermark: true }));
			pictures(draft);
			lines.push(draft);
		}
	}
	return lines;
}
