/** How sure the answer is, what drives its uncertainty, what was left out, and what departs from the defaults. */
import type { ReportModel } from '$lib/report';
import { plainText } from '$lib/wording';
import { leading, sizes, type DocumentKit, type Node } from '$lib/server/reports/render/kit';
import { caution } from './question-answer';
import { documentWords as words } from './wording';

/** A list whose marks are text, so that each item can be told as an item. */
export function list(kit: DocumentKit, items: readonly string[]): Node {
	return {
		stack: items.map((item) => ({
			columns: [
				{ width: 12, text: kit.runs('•', { fontSize: sizes.body }), role: 'Lbl' },
				{ width: '*', text: kit.runs(item, { fontSize: sizes.body }), lineHeight: leading, role: 'LBody' }
			],
			role: 'LI',
			margin: [0, 0, 0, 2]
		})),
		role: 'L',
		margin: [0, 0, 0, 5]
	};
}

export function howSure(kit: DocumentKit, model: ReportModel): Node[] {
	const nodes: Node[] = [kit.heading(words.howSure)];
	const said = new Set<string>();
	for (const run of model.runs) {
		if (model.runs.length > 1) nodes.push(kit.heading(run.title, { level: 3 }));
		nodes.push(kit.paragraph(run.drivers));
		for (const note of run.notes) {
			const text = plainText(note);
			if (said.has(text)) continue;
			said.add(text);
			nodes.push(kit.paragraph(note));
		}
	}
	return nodes;
}

/** Neglected terms, replaced defaults and notes are listed by themselves, not by the author's goodwill. */
export function leftOut(kit: DocumentKit, model: ReportModel): Node[] {
	const methods = [...new Set(model.runs.flatMap((run) => run.method.leavesOut))];
	const deviations = [...new Set(model.runs.flatMap((run) => run.deviations))];
	const notes = model.runs.flatMap((run) => run.cautions).filter((row) => row.level === 'note');
	const codes = [...new Set(notes.map((row) => row.code))];
	/* Notes of one kind stand together: their lead is said once. */
	const grouped = codes.flatMap((code) => {
		const rows = notes.filter((row) => row.code === code);
		const [first] = rows;
		return first ? [{ ...first, text: [...new Set(rows.map((row) => row.text))].join(' ') }] : [];
	});
	return [
		kit.heading(words.leftOut),
		list(kit, methods),
		...(model.text.leftOut.trim()
			? [kit.paragraph(words.leftOutByAuthor), ...kit.paragraphs(model.text.leftOut)]
			: []),
		kit.heading(words.deviations, { level: 3 }),
		deviations.length > 0 ? list(kit, deviations) : kit.paragraph(words.noDeviations),
		...grouped.map((row) => caution(kit, row, sizes.body))
	];
}
