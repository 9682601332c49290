/** The question, the answer with its uncertainty, what it averages, and the cautions that qualify it. */
import type { CautionRow, ReportModel, RunModel } from '$lib/report';
import {
	leading,
	colours,
	page,
	sizes,
	textWidth,
	type DocumentKit,
	type Node
} from '$lib/server/reports/render/kit';
import { documentWords as words } from './wording';

/**
 * A caution: wash with a bar at the left, bold first words, in the size of the answer that it qualifies.
 */
export function caution(kit: DocumentKit, row: CautionRow, fontSize = sizes.answer): Node {
	const bar = row.level === 'note' ? colours.shade : colours.sun;
	const wash = row.level === 'note' ? colours.shadeWash : colours.sunWash;
	const style = { font: 'Noto Sans', fontSize } as const;
	const cited = row.cite && kit.knows(row.cite) ? [' ', { cite: row.cite }, '.'] : [];
	const text = cited.length > 0 ? row.text.replace(/\.$/, '') : row.text;
	return {
		table: {
			widths: [textWidth - 26],
			body: [
				[
					{
						text: [
							...kit.runs(`${row.lead} `, { ...style, bold: true }),
							...kit.runs([text, ...cited], style)
						],
						lineHeight: leading,
						role: 'P'
					}
				]
			]
		},
		layoutOnly: true,
		layout: {
			hLineWidth: () => 0,
			vLineWidth: (i: number) => (i === 0 ? 3 : 0),
			vLineColor: () => bar,
			fillColor: () => wash,
			paddingLeft: () => 12,
			paddingRight: () => 12,
			paddingTop: () => 5,
			paddingBottom: () => 5
		},
		unbreakable: true,
		margin: [0, 3, 0, 5]
	};
}

function computed(kit: DocumentKit, run: RunModel, label: string): Node {
	const [first, ...rest] = run.headline;
	const headline =
		label && typeof first === 'string'
			? [first.charAt(0).toLowerCase() + first.slice(1), ...rest]
			: run.headline;
	return kit.paragraph([label, ...headline], { fontSize: sizes.answer }, { lineHeight: leading });
}

function details(kit: DocumentKit, run: RunModel): Node[] {
	const sentences = [run.averages, words.appliesOnly, ...(run.aside ? [run.aside] : [])];
	const nodes = [kit.paragraph(sentences.join(' '))];
	if (run.finding) {
		if (run.finding.quotation) {
			nodes.push(kit.paragraph(words.quotation(run.finding.quotation, run.finding.citation)));
		}
		nodes.push(kit.paragraph(run.finding.reasons));
	}
	return nodes;
}

/** Cautions and stops of all runs, each once. */
export function gravest(model: ReportModel): CautionRow[] {
	const seen = new Set<string>();
	return model.runs
		.flatMap((run) => run.cautions)
		.filter((row) => {
			const key = `${row.code}|${row.text}`;
			if (row.level === 'note' || seen.has(key)) return false;
			seen.add(key);
			return true;
		})
		.sort((a, b) => Number(b.level === 'stop') - Number(a.level === 'stop'));
}

/** Question, background, answer and cautions. */
export function questionAndAnswer(kit: DocumentKit, model: ReportModel): Node[] {
	const written = model.text.answer.trim();
	const own = written !== '' && written !== model.composedAnswer.trim();
	const nodes: Node[] = [
		kit.heading(words.question),
		...kit.paragraphs(model.text.question, { fontSize: sizes.body + 0.6 }),
		...(model.text.background.trim()
			? [kit.heading(words.background, { level: 3 }), ...kit.paragraphs(model.text.background)]
			: []),
		kit.heading(words.answer, { notch: true })
	];
	if (own) nodes.push(...kit.paragraphs(written, { fontSize: sizes.answer }, { lineHeight: leading }));
	for (const run of model.runs) {
		if (model.runs.length > 1) nodes.push(kit.heading(run.title, { level: 3 }));
		if (run.finding && !own) {
			nodes.push(
				kit.paragraph([{ strong: run.finding.heading }], { fontSize: sizes.answer }, { lineHeight: leading })
			);
		}
		nodes.push(computed(kit, run, own ? words.computed : ''));
		if (run.finding && own) nodes.push(kit.paragraph([{ strong: run.finding.heading }]));
		nodes.push(...details(kit, run));
	}
	return [...nodes, ...gravest(model).map((row) => caution(kit, row))];
}

/** Left edge of the text, for parts that draw in the margin. */
export const textLeft = page.left;
