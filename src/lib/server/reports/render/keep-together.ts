/** No heading stands alone at the foot of a page. */
import { page, type Node } from './kit';

/** Longest text that is kept on one page with its heading; more might not fit on any page. */
const longestKept = 1200;

const longestList = 500;

function textLength(value: unknown): number {
	if (typeof value === 'string') return value.length;
	if (Array.isArray(value)) return value.reduce<number>((sum, item) => sum + textLength(item), 0);
	if (value === null || typeof value !== 'object') return 0;
	const node = value as Node;
	return ['text', 'stack', 'columns'].reduce((sum, key) => sum + textLength(node[key]), 0);
}

const isHeading = (node: Node | undefined): boolean =>
	(typeof node?.headlineLevel === 'number' && node.headlineLevel > 1) || node?.keepWithNext === true;

/**
 * Joins each heading with what follows it into one block that does not break. A table may be longer than a page and
 * is left apart: its heading keeps the level by which `headingAlone` finds it.
 */
export function keepHeadings(content: readonly Node[]): Node[] {
	const kept: Node[] = [];
	for (let i = 0; i < content.length; i += 1) {
		const headings: Node[] = [];
		while (isHeading(content[i])) headings.push(content[i++] as Node);
		const next = content[i];
		if (headings.length === 0) {
			if (next) kept.push(next);
			continue;
		}
		const long =
			next?.role === 'Table'
				? next.small !== true
				: textLength(next) > (next?.role === 'L' ? longestList : longestKept);
		if (!next || long) {
			kept.push(...headings);
			if (next) kept.push(next);
			continue;
		}
		kept.push({
			stack: [...headings.map((heading) => ({ ...heading, headlineLevel: undefined })), next],
			unbreakable: true
		});
	}
	return kept;
}

/** Room below which a heading before a table moves to the next page: the heading, the table's head and one row. */
const tableStart = 96;

interface PlacedNode {
	headlineLevel?: number;
	startPosition: { top: number };
}

/** Whether a heading that precedes a long table stands too low on its page for the table to begin below it. */
export function headingAlone(node: PlacedNode): boolean {
	if (node.headlineLevel === undefined || node.headlineLevel < 2) return false;
	return node.startPosition.top > page.height - page.bottom - tableStart;
}
