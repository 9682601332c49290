/** A structural check of a written PDF, from `qpdf --qdf`: what is drawn outside any marked content. */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

export interface MarkedContentReport {
	/** Painting operators that belong to no marked content. */
	unmarked: string[];
	/** Pieces that belong to an element, and artifacts. */
	elements: number;
	artifacts: number;
	/** Content streams whose marks do not close. */
	unbalanced: number;
}

const painting = /(?:^|\s)(Tj|TJ|f\*?|F|S|s|B\*?|b\*?|Do|sh)$/;

/** The file with its streams laid open. */
export function laidOpen(pdf: Uint8Array): string {
	const folder = mkdtempSync(join(tmpdir(), 'report-'));
	try {
		writeFileSync(join(folder, 'in.pdf'), pdf);
		execFileSync('qpdf', [
			'--qdf',
			'--object-streams=disable',
			join(folder, 'in.pdf'),
			join(folder, 'out.pdf')
		]);
		return readFileSync(join(folder, 'out.pdf'), 'latin1');
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
}

/** Checks the page contents of a report. */
export function checkMarkedContent(pdf: Uint8Array): MarkedContentReport {
	const report: MarkedContentReport = { unmarked: [], elements: 0, artifacts: 0, unbalanced: 0 };
	for (const [, stream = ''] of laidOpen(pdf).matchAll(
		/%% Contents for page \d+\n[\s\S]*?stream\n([\s\S]*?)endstream/g
	)) {
		let depth = 0;
		for (const line of stream.split('\n')) {
			if (/ BDC$/.test(line)) {
				depth += 1;
				report.elements += 1;
			} else if (/ BMC$/.test(line)) {
				depth += 1;
				report.artifacts += 1;
			} else if (line === 'EMC') depth -= 1;
			else if (depth === 0 && painting.test(line)) report.unmarked.push(line);
		}
		if (depth !== 0) report.unbalanced += 1;
	}
	return report;
}
