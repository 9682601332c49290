import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { sectionsOf } from './sections';
import { line, remark } from './testing';

describe('sectionsOf', () => {
	it('sets prose as prose, and facts, results and assumptions as tables, in the order of the report', () => {
		const sections = sectionsOf([
			line('report.title', { section: 'Title block' }),
			line('dossier.client', { section: 'Title block' }),
			line('text.question', { section: 'Question and answer' }),
			line('run:1', { section: 'Roof' }),
			line('run:1/output:a', { section: 'Roof' }),
			line('run:1/output:b', { section: 'Roof' }),
			line('run:1/input:a', { section: 'Roof' }),
			line('run:1/deviations', { section: 'Roof' }),
			line('dossier.scope', { section: 'Scope' }),
			line('evidence:1', { section: 'Evidence files' })
		]);
		expect(
			sections.map(({ title, blocks }) => [title, blocks.map(({ set, lines }) => `${lines.length} ${set}`)])
		).toEqual([
			['Title block', ['2 facts']],
			['Question and answer', ['1 prose']],
			['Roof', ['1 prose', '2 outputs', '1 inputs', '1 prose']],
			['Scope', ['1 prose']],
			['Evidence files', ['1 facts']]
		]);
	});

	it('counts what changed, and the remarks that are not settled', () => {
		const [section] = sectionsOf([
			line('text.answer', { changed: { before: 'other' }, comments: [remark(), remark({ id: 'c2' })] }),
			line('text.question', { comments: [remark({ id: 'c3', settledAt: new Date() })] })
		]);
		expect(section).toMatchObject({ changes: 1, open: 2 });
	});

	it('keeps every line once, in order, whatever the sections', () => {
		const place = fc.constantFrom('text.answer', 'report.title', 'run:1', 'run:1/input:a', 'run:1/output:b');
		const some = fc.array(fc.record({ place, section: fc.constantFrom('A', 'B') }));
		fc.assert(
			fc.property(some, (given) => {
				const lines = given.map(({ place, section }, i) => line(place, { section, text: String(i) }));
				const kept = sectionsOf(lines).flatMap(({ blocks }) => blocks.flatMap((block) => block.lines));
				expect(kept).toEqual(lines);
				expect(new Set(sectionsOf(lines).map(({ id }) => id)).size).toBe(sectionsOf(lines).length);
			})
		);
	});
});
