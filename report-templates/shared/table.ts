/** Tables in the look: no vertical rules, header underlined in ink, hairlines between rows, header repeated on each page. */
import { leading, colours, sizes, type DocumentKit, type Node } from '$lib/server/reports/render/kit';

export interface Column {
	title: string;
	width: number | '*';
	align?: 'left' | 'right';
}

const padding = 7;

function textLength(cell: Node): number {
	const { text } = cell;
	return Array.isArray(text)
		? text.reduce<number>((sum, run: { text?: string }) => sum + (run.text?.length ?? 0), 0)
		: 0;
}

/** Header cell in the sans face. */
function headerCell(kit: DocumentKit, column: Column): Node {
	return {
		text: kit.runs(column.title, { font: 'Noto Sans', fontSize: sizes.table, bold: true }),
		alignment: column.align ?? 'left',
		lineHeight: leading,
		role: 'TH',
		scope: 'Column'
	};
}

/** A table with a header row; the first cell of each row names the row. */
export function dataTable(
	kit: DocumentKit,
	columns: readonly Column[],
	rows: readonly (readonly Node[])[]
): Node {
	return {
		table: {
			headerRows: 1,
			keepWithHeaderRows: 1,
			/* A row longer than a page could hold must be allowed to break. */
			dontBreakRows: rows.every((row) => row.every((cell) => textLength(cell) < 900)),
			widths: columns.map((column) => (column.width === '*' ? '*' : column.width - padding)),
			body: [
				columns.map((column) => headerCell(kit, column)),
				...rows.map((row) =>
					row.map((cell, i) => ({
						alignment: columns[i]?.align ?? 'left',
						lineHeight: leading,
						role: i === 0 ? 'TH' : 'TD',
						...(i === 0 ? { scope: 'Row' } : {}),
						...cell
					}))
				)
			]
		},
		role: 'Table',
		/* Kept on one page with its heading. */
		small: rows.length <= 5 && rows.flat().reduce((sum, cell) => sum + textLength(cell), 0) < 700,
		layout: {
			hLineWidth: (i: number, node: { table: { body: unknown[] } }) =>
				i === 0 ? 0 : i === 1 ? 0.8 : i === node.table.body.length ? 0.5 : 0.5,
			vLineWidth: () => 0,
			hLineColor: (i: number) => (i === 1 ? colours.ink : colours.rule),
			paddingLeft: () => 0,
			paddingRight: (i: number, node: { table: { widths: unknown[] } }) =>
				i === node.table.widths.length - 1 ? 0 : padding,
			paddingTop: () => 3.2,
			paddingBottom: () => 3.2
		},
		margin: [0, 2, 0, 8]
	};
}

/** A cell of words in the sans face, with lines in the secondary colour below. */
export function wordsCell(kit: DocumentKit, first: Node[] | string, below: readonly string[] = []): Node {
	const style = { font: 'Noto Sans', fontSize: sizes.table } as const;
	const lines: Node[] = typeof first === 'string' ? kit.runs(first, style) : first;
	return {
		text: [
			...lines,
			...below.flatMap((line) =>
				kit.runs(`\n${line}`, { ...style, fontSize: sizes.small, color: colours.soft })
			)
		]
	};
}

/** A cell of a number in the serif face. */
export function numberCell(kit: DocumentKit, text: string, below: readonly string[] = []): Node {
	return {
		text: [
			...kit.runs(text, { fontSize: sizes.table }),
			...below.flatMap((line) =>
				kit.runs(`\n${line}`, { font: 'Noto Sans', fontSize: sizes.small, color: colours.soft })
			)
		]
	};
}
