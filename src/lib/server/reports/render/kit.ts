/**
 * What a template builds with: text, headings, equations and figures in the document's look, each with its role, so
 * that the written file can say what is a heading and what a table. Citations get their numbers as they are used.
 */
import { figureSpec } from '$lib/figures';
import { palette } from '$lib/figures/palette';
import type { Citation } from '$lib/methods/types';
import type { FigureRow, ReportModel } from '$lib/report';
import { drawForDocument, measureFigureText } from '$lib/server/figures/draw';
import { drawEquation } from '$lib/server/typesetting/equations';
import type { Phrase } from '$lib/wording/phrase';
import { phraseRuns, textRuns, type Run, type RunStyle } from './runs';
import { symbolRuns } from './symbols';

/** A node of the layout library, with our own keys beside its own. */
export interface Node {
	[key: string]: unknown;
}

export const page = {
	width: 595.28,
	height: 841.89,
	left: 80,
	right: 52,
	top: 56,
	bottom: 58,
	/** Where the noon line stands. */
	line: 54
};

export const textWidth = page.width - page.left - page.right;

export const sizes = {
	title: 19,
	heading: 11.6,
	subheading: 10.5,
	answer: 12,
	body: 9.8,
	table: 8.8,
	small: 8
};

/** Line height over the face's own, which is generous already. */
export const leading = 1.04;

export const colours = palette;

export class DocumentKit {
	readonly #references: ReadonlyMap<string, Citation>;
	readonly #cited: Citation[] = [];
	#figures = 0;
	#equations = 0;

	constructor(model: ReportModel) {
		this.#references = new Map(model.references.map((reference) => [reference.id, reference]));
	}

	/** Number of a cited work, given at its first citation. */
	numberOf = (id: string): number => {
		const at = this.#cited.findIndex((reference) => reference.id === id);
		if (at >= 0) return at + 1;
		const reference = this.#references.get(id);
		if (!reference) throw new Error(`The report cites “${id}”, which is not among its references.`);
		return this.#cited.push(reference);
	};

	/** True for a work that may be cited. */
	knows(id: string): boolean {
		return this.#references.has(id);
	}

	/** Works cited so far, in order of citation. */
	get cited(): readonly Citation[] {
		return this.#cited;
	}

	runs(phrase: Phrase | string, style: RunStyle = {}): Run[] {
		return typeof phrase === 'string' ? textRuns(phrase, style) : phraseRuns(phrase, style, this.numberOf);
	}

	symbol(tex: string, style: RunStyle = {}): Run[] {
		return symbolRuns(tex, style);
	}

	paragraph(phrase: Phrase | string, style: RunStyle = {}, node: Node = {}): Node {
		const text = this.runs(phrase, { fontSize: sizes.body, ...style });
		return {
			text,
			/* The layout library knows no widows: a short paragraph is not broken at all. */
			unbreakable: text.reduce((sum, run) => sum + run.text.length, 0) < 450,
			lineHeight: leading,
			margin: [0, 0, 0, 4],
			role: 'P',
			...node
		};
	}

	/** Paragraphs of a text as typed: an empty line starts a new one. */
	paragraphs(text: string, style: RunStyle = {}, node: Node = {}): Node[] {
		return text
			.split(/\n\s*\n/)
			.map((part) => part.trim())
			.filter(Boolean)
			.map((part) => this.paragraph(part, style, node));
	}

	/** A section's heading; it hangs on the noon line by a tick, and the answer's by the notch. */
	heading(text: string, options: { level?: 1 | 2 | 3; notch?: boolean; id?: string } = {}): Node {
		const level = options.level ?? 2;
		return {
			text: textRuns(text, { bold: true, fontSize: level === 3 ? sizes.subheading : sizes.heading }).map(
				(run, i) => (i === 0 && level < 3 ? { ...run, noon: options.notch ? 'notch' : 'tick' } : run)
			),
			lineHeight: 1.1,
			margin: [0, level === 3 ? 4 : 9, 0, 2],
			headlineLevel: level,
			role: `H${level}`,
			...(level < 3 ? { outline: true, outlineText: text } : {}),
			...(options.id ? { id: options.id } : {})
		};
	}

	/** A display equation with its number, and below it the same with the numbers put in. */
	async equation(tex: string, spoken: string, options: { numbered?: boolean } = {}): Promise<Node> {
		const numberWidth = 34;
		const drawing = await drawEquation(tex, {
			fontSize: 11,
			maxWidth: textWidth - numberWidth - 14,
			colour: colours.ink
		});
		const number = options.numbered ? `(${(this.#equations += 1)})` : '';
		return {
			columns: [
				{ width: 14, text: '' },
				{ width: '*', svg: drawing.svg, role: 'Formula', alt: spoken },
				{
					width: numberWidth,
					text: textRuns(number, { fontSize: sizes.body }),
					alignment: 'right',
					role: 'Lbl',
					margin: [0, Math.max(0, drawing.height / 2 - 7), 0, 0]
				}
			],
			margin: [0, 3, 0, 3],
			role: 'P',
			unbreakable: true
		};
	}

	/** A figure with its number and caption, whose first sentence is the finding. */
	async figure(row: FigureRow, words: { label: (n: number) => string; detail: string }): Promise<Node> {
		const number = (this.#figures += 1);
		const spec = figureSpec(row.series, {
			width: textWidth,
			height: 126,
			fontSize: 8.6,
			measure: measureFigureText,
			...(row.yName === null ? {} : { yName: row.yName }),
			...(row.stated ? { stated: row.stated } : {}),
			...(row.assumed ? { assumed: row.assumed } : {})
		});
		return {
			stack: [
				{
					svg: await drawForDocument(spec),
					font: 'Noto Sans',
					role: 'Figure',
					alt: `${row.title}. ${row.finding}`
				},
				{
					text: [
						...textRuns(`${words.label(number)} ${row.finding} `, {
							font: 'Noto Sans',
							fontSize: sizes.table,
							bold: true
						}),
						...textRuns(words.detail, { font: 'Noto Sans', fontSize: sizes.table, color: colours.soft })
					],
					lineHeight: leading,
					margin: [0, 1, 0, 0],
					role: 'Caption'
				}
			],
			role: 'Div',
			unbreakable: true,
			margin: [0, 6, 0, 8]
		};
	}
}
