/**
 * The structure of a document for readers that do not see it. `buildStructure` walks the definition before layout,
 * makes the tree (sections nested by their headings, tables with header cells, lists, figures, formulas, links) and
 * puts the element on every run and drawing; the renderer marks what it draws for them; `writeStructure` writes the
 * tree. Whatever carries no element becomes an artifact.
 */
import type { Node } from './kit';

export interface StructureElement {
	role: string;
	parent: StructureElement | null;
	children: (StructureElement | MarkedContent | ObjectReference)[];
	alt?: string;
	scope?: 'Column' | 'Row';
	/** A figure's place, in PDF coordinates. */
	box?: [number, number, number, number];
	/** Set once a drawing has been drawn: a second one is a repeat. */
	drawn?: boolean;
	/** Not yet among its parent's children. */
	waiting?: boolean;
}

/** A piece of a page's content that belongs to an element. */
export interface MarkedContent {
	page: object;
	mcid: number;
}

/** An annotation (link, signature field) that belongs to an element. */
export interface ObjectReference {
	page: object;
	annotation: object;
}

/** Private key of a run or drawing: the element it belongs to. */
export const elementKey = 'structureElement';
/** Private key of a run: the link that it is a part of. */
export const linkKey = 'structureLink';

export interface LinkTarget {
	/** A web address or the name of a destination in the document. */
	url?: string;
	destination?: string;
	/** Said for the link. */
	contents: string;
}

export function element(
	role: string,
	parent: StructureElement | null,
	extra: Partial<StructureElement> = {}
): StructureElement {
	const made: StructureElement = { role, parent, children: [], ...extra };
	parent?.children.push(made);
	return made;
}

interface Cursor {
	parent: StructureElement;
	/** Innermost open sections, by heading level. */
	sections: { level: number; element: StructureElement }[];
	root: StructureElement;
}

const headingLevel = (role: unknown): number | undefined =>
	typeof role === 'string' && /^H[1-3]$/.test(role) ? Number(role.slice(1)) : undefined;

/** Parent of the next block at the top level: the innermost section. */
function openSection(cursor: Cursor): StructureElement {
	return cursor.sections.at(-1)?.element ?? cursor.root;
}

function stampRuns(text: unknown, owner: StructureElement): unknown {
	const runs = Array.isArray(text) ? text : [text];
	let link: { key: string; element: StructureElement; target: LinkTarget } | undefined;
	return runs.map((run: unknown) => {
		if (typeof run === 'string') {
			link = undefined;
			return run === '' ? { text: '' } : { text: run, [elementKey]: owner };
		}
		const {
			link: url,
			linkToDestination: destination,
			...rest
		} = run as Node & {
			link?: string;
			linkToDestination?: string;
		};
		const key = url ?? destination;
		if (key === undefined) {
			link = undefined;
			return { ...rest, [elementKey]: owner };
		}
		if (link?.key !== key) {
			const target: LinkTarget = url
				? { url, contents: url }
				: { destination: key, contents: `Reference ${key.replace(/^\D+/, '')}` };
			/* Takes its place among the owner's pieces when it is drawn, in reading order. */
			link = { key, element: { role: 'Link', parent: owner, children: [], waiting: true }, target };
		}
		return { ...rest, [elementKey]: link.element, [linkKey]: { element: link.element, ...link.target } };
	});
}

function walkTable(node: Node, cursor: Cursor, parent: StructureElement): Node {
	const { body } = node.table as { body: Node[][] };
	if (node.layoutOnly === true) {
		const inner = element('Div', parent);
		const rows = body.map((row) => row.map((cell) => walk(cell, { ...cursor, parent: inner })));
		return { ...node, table: { ...(node.table as object), body: rows } };
	}
	const table = element('Table', parent);
	const rows = body.map((row) => {
		const line = element('TR', table);
		return row.map((cell) => {
			const made = element(
				cell.role === 'TH' ? 'TH' : 'TD',
				line,
				cell.scope ? { scope: cell.scope as 'Row' } : {}
			);
			return { ...cell, text: stampRuns(cell.text, made) };
		});
	});
	return { ...node, table: { ...(node.table as object), body: rows } };
}

function walk(node: Node, cursor: Cursor): Node {
	const level = headingLevel(node.role);
	let { parent } = cursor;
	if (level !== undefined) {
		while ((cursor.sections.at(-1)?.level ?? 0) >= level) cursor.sections.pop();
		const section = element('Sect', openSection(cursor));
		cursor.sections.push({ level, element: section });
		parent = section;
	} else if (parent === cursor.root) parent = openSection(cursor);
	if (node.table) return walkTable(node, cursor, parent);
	if (node.svg !== undefined) {
		if (typeof node.alt !== 'string' || node.alt === '')
			throw new Error('A drawing in a report needs words for the ear.');
		return { ...node, [elementKey]: element(String(node.role ?? 'Figure'), parent, { alt: node.alt }) };
	}
	const role = typeof node.role === 'string' ? node.role : undefined;
	const children = Array.isArray(node.stack) ? 'stack' : Array.isArray(node.columns) ? 'columns' : undefined;
	if (children) {
		const own = role ? element(role, parent) : parent;
		const inner = role ? { ...cursor, parent: own } : { ...cursor, parent: cursor.parent };
		return { ...node, [children]: (node[children] as Node[]).map((child) => walk(child, inner)) };
	}
	if (node.text !== undefined && node.text !== '') {
		const runs = Array.isArray(node.text) ? node.text : [node.text];
		if (runs.length === 0) return node;
		return { ...node, text: stampRuns(node.text, element(role ?? 'P', parent)) };
	}
	return node;
}

export interface Structure {
	content: Node[];
	root: StructureElement;
	/** The section that holds the signature. */
	signatureParent: StructureElement;
}

/** The definition's content with every run and drawing stamped, and the tree's root. */
export function buildStructure(content: readonly Node[]): Structure {
	const root = element('Document', null);
	const cursor: Cursor = { parent: root, sections: [], root };
	let signatureParent = root;
	const stamped = content.map((node) => {
		const result = walk(node, cursor);
		if (node.signaturePlace === true) signatureParent = openSection(cursor);
		return result;
	});
	return { content: stamped, root, signatureParent };
}
