/** Writes the structure tree of a laid-out document: elements, the way back from content to element, and the roots. */
import type { WrittenDocument } from './library';
import type { MarkedContent, ObjectReference, StructureElement } from './structure';

interface Reference {
	data: Record<string, unknown>;
	end(): void;
}

interface NumberTree {
	limits: boolean;
	add(key: number, value: unknown): void;
}

interface TaggedDocument extends WrittenDocument {
	ref(data: Record<string, unknown>): Reference;
	getStructTreeRoot(): Reference & {
		data: { ParentTree: NumberTree; ParentTreeNextKey: number; K?: unknown };
	};
}

interface PageState {
	/** Key of the page in the parent tree, and the owners of its marked pieces in order. */
	key: number;
	owners: StructureElement[];
}

/** What the renderer collects while it draws one document. */
export class StructureState {
	readonly pages = new Map<object, PageState>();
	readonly annotations: { key: number; owner: StructureElement }[] = [];
	#next = 0;

	nextKey(): number {
		return this.#next++;
	}

	get keys(): number {
		return this.#next;
	}

	/** Notes a piece of a page's content as the element's; returns its number on the page. */
	mark(page: object & { data: Record<string, unknown> }, owner: StructureElement): number {
		let state = this.pages.get(page);
		if (!state) {
			state = { key: this.nextKey(), owners: [] };
			this.pages.set(page, state);
			page.data.StructParents = state.key;
		}
		if (owner.waiting) {
			owner.waiting = false;
			owner.parent?.children.push(owner);
		}
		const mcid = state.owners.push(owner) - 1;
		owner.children.push({ page, mcid } satisfies MarkedContent);
		return mcid;
	}

	/** Notes an annotation as the element's; returns its key for the annotation's StructParent. */
	annotate(owner: StructureElement): number {
		const key = this.nextKey();
		this.annotations.push({ key, owner });
		return key;
	}
}

const words = (value: string): object => Object(value) as object;

function isElement(child: StructureElement['children'][number]): child is StructureElement {
	return 'role' in child;
}

function isMarked(child: MarkedContent | ObjectReference): child is MarkedContent {
	return 'mcid' in child;
}

/** Table rows are kept whole: an empty cell is still a cell. */
function keepsEmpty(element: StructureElement): boolean {
	return element.role === 'TD' || element.role === 'TH';
}

function attributes(element: StructureElement): Record<string, unknown> {
	const data: Record<string, unknown> = {};
	if (element.alt) data.Alt = words(element.alt);
	if (element.scope) data.A = { O: 'Table', Scope: element.scope };
	if (element.box) data.A = { O: 'Layout', Placement: 'Block', BBox: element.box };
	return data;
}

function kid(child: MarkedContent | ObjectReference): unknown {
	return isMarked(child)
		? { Type: 'MCR', Pg: child.page, MCID: child.mcid }
		: { Type: 'OBJR', Pg: child.page, Obj: child.annotation };
}

/** Writes the tree; after layout and before the document ends. */
export function writeStructure(doc: WrittenDocument, root: StructureElement, state: StructureState): void {
	const tagged = doc as TaggedDocument;
	const treeRoot = tagged.getStructTreeRoot();
	const references = new Map<StructureElement, Reference>();
	pruneTree(root);
	const declare = (element: StructureElement): void => {
		references.set(element, tagged.ref({ Type: 'StructElem', S: element.role, ...attributes(element) }));
		element.children.filter(isElement).forEach(declare);
	};
	declare(root);
	for (const [element, reference] of references) {
		reference.data.P = element.parent ? references.get(element.parent) : treeRoot;
		reference.data.K = element.children.map((child) =>
			isElement(child) ? references.get(child) : kid(child)
		);
		reference.end();
	}
	for (const { key, owners } of state.pages.values()) {
		treeRoot.data.ParentTree.add(
			key,
			owners.map((owner) => references.get(owner))
		);
	}
	for (const { key, owner } of state.annotations) treeRoot.data.ParentTree.add(key, references.get(owner));
	/* A root that states limits breaks the form of a number tree. */
	treeRoot.data.ParentTree.limits = false;
	treeRoot.data.ParentTreeNextKey = state.keys;
	treeRoot.data.K = [references.get(root)];
}

/** Drops elements that nothing was drawn for, so that no empty paragraph is announced. */
function pruneTree(root: StructureElement): void {
	const visit = (element: StructureElement): boolean => {
		element.children = element.children.filter(
			(child) => !isElement(child) || keepsEmpty(child) || visit(child)
		);
		return element.children.length > 0;
	};
	visit(root);
}
