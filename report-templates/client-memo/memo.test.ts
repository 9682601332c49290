import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { JSDOM } from 'jsdom';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { compute } from '$lib/calculation';
import { methodById } from '$lib/methods';
import { buildReportModel, recordAttachment, unmetDuties, type ReportModel } from '$lib/report';
import { renderReport, unprintableText, UnprintableTextError } from '$lib/server/reports/render';
import { checkMarkedContent, laidOpen } from '$lib/server/reports/render/testing/marked-content';
import { samples } from './sample';

const signature = {
	name: 'Tallis Brook Consulting',
	reason: 'Issue',
	time: new Date('2026-11-28T09:30:00Z')
};
/* A first rendering reads whole typefaces; a busy machine takes its time. */
vi.setConfig({ testTimeout: 60_000 });

const folder = mkdtempSync(join(tmpdir(), 'memo-'));
afterAll(() => {
	rmSync(folder, { recursive: true, force: true });
});

const models: Record<string, ReportModel> = {};
const files: Record<string, Buffer> = {};

function model(name: string): ReportModel {
	const found = models[name];
	if (!found) throw new Error(`no sample ${name}`);
	return structuredClone(found);
}

function file(name: string): string {
	const path = join(folder, `${name}.pdf`);
	writeFileSync(path, files[name] ?? '');
	return path;
}

const tool = (command: string, ...args: string[]): string =>
	execFileSync(command, args, { encoding: 'utf8' });
const flat = (text: string): string => text.replace(/[\s\u00a0\u202f]+/g, ' ');

function pages(name: string): string[] {
	return tool('pdftotext', '-layout', file(name), '-')
		.split('\f')
		.filter((page) => page.trim());
}

beforeAll(async () => {
	for (const [name, sample] of Object.entries(samples)) {
		const built = buildReportModel(await sample({ compute, methodOf: methodById }), { methodOf: methodById });
		models[name] = built;
		files[name] = await renderReport(built, { signature });
	}
	files.draft = await renderReport(model('limit'), { watermark: true });
}, 120_000);

describe.each(['value', 'claim', 'limit', 'strain', 'reviewed'])('the memo “%s”', (name) => {
	it('owes its reader nothing', () => {
		expect(unmetDuties(model(name))).toEqual([]);
	});

	it('carries its id, its revision and the number of the page on every page, and an end mark on the last', () => {
		const { number, revision } = model(name);
		const all = pages(name);
		all.forEach((page, i) => {
			expect(flat(page)).toContain(`${number}, revision ${revision}`);
			expect(flat(page)).toContain(`page ${i + 1} of ${all.length}`);
			expect(page).toContain('To be reproduced only in full.');
		});
		expect(flat(all.at(-1) ?? '')).toContain(`End of ${number}, revision ${revision}`);
	});

	it('says on page one how it is checked, and next to the result that it holds for this case only', () => {
		const [first = '', second = ''] = pages(name);
		expect(flat(first)).toContain('https://noonmark.example/verify with the code 8KQ2-7MTR');
		expect(flat(first)).toContain('will call the signer unknown');
		expect(flat(first + second)).toContain('The result applies to the case described here and to no other.');
	});

	it('embeds every typeface', () => {
		const fonts = tool('pdffonts', file(name)).split('\n').slice(2).filter(Boolean);
		expect(fonts.length).toBeGreaterThanOrEqual(5);
		for (const font of fonts) expect(font).toMatch(/CID TrueType\s+Identity-H\s+yes yes yes/);
	});

	it('attaches the record byte for byte, as data', () => {
		const out = join(folder, `${name}.json`);
		tool('pdfdetach', '-save', '1', '-o', out, file(name));
		expect(readFileSync(out, 'utf8')).toBe(recordAttachment(model(name)));
		expect(files[name]?.toString('latin1')).toContain('/AFRelationship /Data');
	});

	it('is free of faults of structure', () => {
		expect(tool('qpdf', '--check', file(name))).toContain('No syntax or stream encoding errors found');
		const marks = checkMarkedContent(files[name] ?? Buffer.alloc(0));
		expect(marks.unmarked).toEqual([]);
		expect(marks.unbalanced).toBe(0);
		expect(marks.elements).toBeGreaterThan(60);
	});

	it('is a tagged PDF/A-3b of version 1.7 with title and language, and well-formed metadata', () => {
		const info = tool('pdfinfo', file(name));
		expect(info).toMatch(/Tagged:\s+yes/);
		expect(info).toMatch(/PDF version:\s+1\.7/);
		expect(info).toContain('Client memo');
		const xmp = tool('pdfinfo', '-meta', file(name));
		const parsed = new JSDOM(xmp.replace(/<\?xpacket[^>]*\?>/g, ''), { contentType: 'text/xml' });
		expect(parsed.window.document.getElementsByTagName('pdfaid:part')[0]?.textContent).toBe('3');
		expect(parsed.window.document.getElementsByTagName('dc:title')[0]?.textContent).toContain(
			model(name).title
		);
		expect(laidOpen(files[name] ?? Buffer.alloc(0))).toContain('/Lang (en-GB)');
	});

	it('gives the same bytes again, and from a model whose keys lost their order', async () => {
		const shuffled = JSON.parse(JSON.stringify(model(name)), (_key, value: unknown) =>
			value && typeof value === 'object' && !Array.isArray(value)
				? Object.fromEntries(Object.entries(value).reverse())
				: value
		) as ReportModel;
		const again = await renderReport(shuffled, { signature });
		expect(again.equals(files[name] ?? Buffer.alloc(0))).toBe(true);
	});
});

describe('what a memo says', () => {
	it('prints real minus signs and the figures of the demonstration', () => {
		const text = flat(pages('claim').join(' '));
		expect(text).toContain('−24.2 °C');
		expect(text).toContain('38.0 °C');
		expect(text).not.toMatch(/[^\w-]-\d/);
		expect(text).toContain('cannot be compared');
		expect(text).toContain('replaces revision 1 of 19 November 2026');
	});

	it('puts numbers without a plus-minus sign', () => {
		for (const name of Object.keys(models)) expect(pages(name).join(' ')).not.toMatch(/±|\+\/-/);
	});

	it('prints cautions no smaller than the answer that they qualify', () => {
		const boxes = tool('pdftotext', '-bbox-layout', file('limit'), '-');
		const height = (word: string): number => {
			const line = new RegExp(`yMin="([\\d.]+)"[^>]*yMax="([\\d.]+)"[^>]*>${word}<`).exec(boxes);
			return Number(line?.[2]) - Number(line?.[1]);
		};
		expect(height('licensed')).toBeGreaterThanOrEqual(height('87.4.') - 0.01);
	});

	it('says exactly what the signature is, and that it is no seal', () => {
		const text = flat(pages('limit').join(' '));
		expect(text).toContain('certificate issued by the service’s own authority (PAdES, baseline level B-B)');
		expect(text).toContain('is claimed by the signer');
		expect(text).toContain('no professional engineer’s seal');
		expect(text).toContain('Not independently reviewed');
		expect(text).not.toMatch(/\bcertified\b/i);
	});

	it('reads in order: headings, tables with header cells, figures and formulas with words', () => {
		const tree = tool('pdfinfo', '-struct-text', file('claim'));
		const order = [
			'The question',
			'The answer',
			'The results',
			'Assumptions',
			'The working',
			'Figures',
			'References'
		];
		const places = order.map((heading) => tree.indexOf(`"${heading}"`));
		expect(places.every((place) => place > 0)).toBe(true);
		expect([...places].sort((a, b) => a - b)).toEqual(places);
		for (const role of ['H1', 'H2', 'Table', 'TH', 'TD', 'Figure', 'Formula', 'Link', 'Caption', 'LBody']) {
			expect(tree).toMatch(new RegExp(`^\\s*${role}\\b`, 'm'));
		}
		const opened = laidOpen(files.claim ?? Buffer.alloc(0));
		const drawings = [...opened.matchAll(/\/S \/(?:Figure|Formula)\b/g)].length;
		expect([...opened.matchAll(/\/Alt /g)].length).toBeGreaterThanOrEqual(drawings);
	});

	it('lands bookmarks on their headings', () => {
		const tops = [...laidOpen(files.claim ?? Buffer.alloc(0)).matchAll(/\/XYZ\s+0\s+([\d.]+)\s+null/g)].map(
			([, top]) => Number(top)
		);
		expect(tops.length).toBeGreaterThan(8);
		expect(new Set(tops).size).toBeGreaterThan(5);
	});
});

describe('the review', () => {
	it('prints who approved it, as what, when and in which words, and nothing of “not reviewed”', () => {
		const text = flat(pages('reviewed').join(' '));
		expect(text).toContain(
			'Reviewed and approved by Idris Venn, guest reviewer from outside the organisation'
		);
		expect(text).toContain('on 27 November 2026');
		expect(text).toContain('Statement at the approval: “I followed each input to its source');
		expect(text).not.toContain('Not independently reviewed');
	});

	it('prints the reviewer’s own figures apart from the results, each with what may be said of it', () => {
		const text = flat(tool('pdftotext', '-raw', file('reviewed'), '-'));
		expect(text).toContain('Figures of the reviewer, by another route');
		expect(text).toContain('−25 °C, give or take 2 K');
		expect(text).toContain('not above 60 °C');
		expect(text).toContain('it is not compared with the result');
		expect(text).toMatch(/lies [\d.]+ K (above|below) the result/);
		expect(text).toContain('only as far as the bound holds for that too');
		const { runs } = model('reviewed');
		expect(runs[0]?.outputs).toEqual(model('value').runs[0]?.outputs);
	});

	it('says of an approval by an author that it is no review', async () => {
		const own: ReportModel = {
			...model('reviewed'),
			review: { kind: 'approved-by-author', by: { name: 'Moss Oakes' }, at: '2026-11-27T18:40:00Z' }
		};
		writeFileSync(join(folder, 'own.pdf'), await renderReport(own, { signature }));
		const text = flat(tool('pdftotext', join(folder, 'own.pdf'), '-'));
		expect(text).toContain(
			'Not independently reviewed: approved by its author Moss Oakes, on 27 November 2026.'
		);
		expect(text).not.toContain('did not write it');
	});

	it('leaves a model frozen before there were reviewers’ figures as it was', async () => {
		const old = model('value');
		expect(old.runs.every((run) => !('reviewerFigures' in run))).toBe(true);
		expect((await renderReport(old, { signature })).equals(files.value ?? Buffer.alloc(0))).toBe(true);
	});
});

describe('a draft', () => {
	it('is marked on every page, has no code, no signature and no code in its record', () => {
		const all = pages('draft');
		for (const page of all) expect(flat(page)).toContain('Draft, not issued');
		expect(all.join(' ')).not.toContain('8KQ2-7MTR');
		const bytes = files.draft?.toString('latin1') ?? '';
		expect(bytes).not.toContain('/ByteRange');
		const out = join(folder, 'draft.json');
		tool('pdfdetach', '-save', '1', '-o', out, file('draft'));
		expect(JSON.parse(readFileSync(out, 'utf8'))).toMatchObject({ report: { code: null } });
	});

	it('cannot be signed', async () => {
		await expect(renderReport(model('value'), { watermark: true, signature })).rejects.toThrow(
			'A draft is not signed.'
		);
	});
});

describe('hostile text', () => {
	it('is printed as it is', () => {
		const text = flat(pages('strain').join(' '));
		expect(text).toContain('A & B <script>alert(1)</script>');
		expect(text).toContain('Бюро');
	});

	it.each([
		['an emoji', 'Hot \u{1F525} roof', '\u{1F525}'],
		['Hebrew', 'חם', 'ח'],
		['Chinese', '热', '热']
	])('of %s is refused by naming the character', async (_what, title, character) => {
		const bad = { ...model('value'), title };
		const failure = await renderReport(bad, { watermark: true }).catch((error: unknown) => error);
		expect(failure).toBeInstanceOf(UnprintableTextError);
		expect((failure as Error).message).toContain(`“${character}”`);
		expect(unprintableText(bad)?.message).toBe((failure as Error).message);
		expect(unprintableText(model('strain'))).toBeNull();
	});

	it('that turns the direction of writing loses that power', async () => {
		const turned = { ...model('value'), title: 'abc\u202Edef' };
		writeFileSync(join(folder, 'turned.pdf'), await renderReport(turned, { watermark: true }));
		expect(tool('pdftotext', join(folder, 'turned.pdf'), '-')).toContain('abcdef');
	});
});
