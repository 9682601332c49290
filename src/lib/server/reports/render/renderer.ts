/**
 * Changes to how a laid-out document is drawn: marked content for the structure tree, bookmarks that land on their
 * heading (the library points them at the page's top right corner), one link for each line of a link (the library
 * makes one for each word), ticks and notch on the noon line, and the place of the signature.
 */
import { colours, page as pageSize } from './kit';
import type { WrittenDocument, WrittenPage } from './library';
import { elementKey, linkKey, type LinkTarget, type StructureElement } from './structure';
import { StructureState } from './structure-writer';

interface Inline {
	x: number;
	width: number;
	trailingCut?: number;
	noon?: 'tick' | 'notch';
	signaturePlace?: boolean;
	[elementKey]?: StructureElement;
	[linkKey]?: LinkTarget & { element: StructureElement };
	[key: string]: unknown;
}

interface Line {
	inlines: Inline[];
	id?: unknown;
	_outline?: unknown;
	getHeight(): number;
	getAscenderHeight(): number;
	getWidth(): number;
	clone(): Line;
}

interface OutlineItem {
	outlineData: Record<string, unknown>;
	children: OutlineItem[];
}

interface DrawingDocument extends WrittenDocument {
	structure?: StructureState;
	seenInlines?: WeakSet<Inline>;
	/** Where the visible signature goes: the union of the lines of its paragraph. */
	signaturePlace?: { page: WrittenPage; left: number; top: number; right: number; bottom: number };
	save(): DrawingDocument;
	restore(): DrawingDocument;
	moveTo(x: number, y: number): DrawingDocument;
	lineTo(x: number, y: number): DrawingDocument;
	closePath(): DrawingDocument;
	lineWidth(w: number): DrawingDocument;
	stroke(colour: string): DrawingDocument;
	fill(colour: string): DrawingDocument;
	opacity(value: number): DrawingDocument;
	addContent(operators: string): DrawingDocument;
	link(x: number, y: number, w: number, h: number, url: string, options: object): unknown;
	goTo(x: number, y: number, w: number, h: number, name: string, options: object): unknown;
}

interface SvgNode {
	x: number;
	y: number;
	_width: number;
	_height: number;
	[elementKey]?: StructureElement;
}

interface RendererPrototype {
	pdfDocument: DrawingDocument;
	renderLine(this: RendererPrototype, line: Line, x: number, y: number): void;
	renderVector(this: RendererPrototype, vector: unknown): void;
	renderSVG(this: RendererPrototype, svg: SvgNode): void;
	renderWatermark(this: RendererPrototype, page: unknown): void;
}

/** What has been marked so far in a document. */
export function structureState(doc: WrittenDocument): StructureState {
	const drawing = doc as DrawingDocument;
	drawing.structure ??= new StructureState();
	return drawing.structure;
}

/** Draws content that belongs to no element. */
function asArtifact(doc: DrawingDocument, draw: () => void): void {
	doc.addContent('/Artifact BMC');
	draw();
	doc.addContent('EMC');
}

/** Draws content that belongs to an element. */
function asElement(doc: DrawingDocument, owner: StructureElement, draw: () => void): void {
	const mcid = structureState(doc).mark(doc.page.dictionary, owner);
	doc.addContent(`/${owner.role} <</MCID ${mcid}>> BDC`);
	draw();
	doc.addContent('EMC');
}

function outlines(doc: DrawingDocument): OutlineItem[] {
	const all: OutlineItem[] = [];
	const walk = (item: OutlineItem): void => {
		all.push(item);
		item.children.forEach(walk);
	};
	(doc.outline as unknown as OutlineItem).children.forEach(walk);
	return all;
}

function drawNoon(doc: DrawingDocument, mark: 'tick' | 'notch', y: number): void {
	const x = pageSize.line;
	doc.save().opacity(1);
	if (mark === 'tick') {
		doc
			.moveTo(x - 5, y)
			.lineTo(x + 5, y)
			.lineWidth(0.7)
			.stroke(colours.ink);
	} else {
		doc
			.moveTo(x, y)
			.lineTo(x - 8, y - 5)
			.lineTo(x - 8, y + 5)
			.closePath()
			.fill(colours.sun);
	}
	doc.restore();
}

function widenSignaturePlace(doc: DrawingDocument, line: Line, x: number, y: number): void {
	const box = { left: x, top: y, right: x + line.getWidth(), bottom: y + line.getHeight() };
	const place = doc.signaturePlace;
	if (!place || place.page !== doc.page) {
		doc.signaturePlace = { page: doc.page, ...box };
		return;
	}
	place.left = Math.min(place.left, box.left);
	place.top = Math.min(place.top, box.top);
	place.right = Math.max(place.right, box.right);
	place.bottom = Math.max(place.bottom, box.bottom);
}

/** Neighbouring runs with the same value of a key. */
function groups<T>(
	inlines: readonly Inline[],
	key: (inline: Inline) => T
): { value: T; inlines: Inline[] }[] {
	const found: { value: T; inlines: Inline[] }[] = [];
	for (const inline of inlines) {
		const value = key(inline);
		const last = found.at(-1);
		if (last && last.value === value) last.inlines.push(inline);
		else found.push({ value, inlines: [inline] });
	}
	return found;
}

/** A line with some of its runs, at the height of the whole. */
function part(line: Line, inlines: Inline[], first: boolean): Line {
	const clone = line.clone();
	clone.inlines = inlines;
	clone.getHeight = () => line.getHeight();
	clone.getAscenderHeight = () => line.getAscenderHeight();
	if (!first) {
		clone._outline = undefined;
		clone.id = undefined;
	}
	return clone;
}

function addLinks(doc: DrawingDocument, line: Line, x: number, y: number): void {
	for (const group of groups(line.inlines, (inline) => inline[linkKey]?.element)) {
		const link = group.inlines[0]?.[linkKey];
		const [first, last] = [group.inlines[0], group.inlines.at(-1)];
		if (!link || !first || !last) continue;
		const width = last.x + last.width - (last.trailingCut ?? 0) - first.x;
		const options = {
			StructParent: structureState(doc).annotate(link.element),
			Contents: Object(link.contents) as object
		};
		const at = [x + first.x, y, width, line.getHeight()] as const;
		if (link.url) doc.link(...at, link.url, options);
		else doc.goTo(...at, link.destination ?? '', options);
		link.element.children.push({
			page: doc.page.dictionary,
			annotation: doc.page.annotations.at(-1) as object
		});
	}
}

/** Repeated header rows draw the very same runs again: only the first drawing is content. */
function firstDrawing(doc: DrawingDocument, inlines: readonly Inline[]): boolean {
	doc.seenInlines ??= new WeakSet();
	const fresh = inlines.every((inline) => !doc.seenInlines?.has(inline));
	inlines.forEach((inline) => doc.seenInlines?.add(inline));
	return fresh;
}

/** Applies the changes to the library's renderer; once per process. */
export function patchRenderer(module: { default: { prototype: RendererPrototype } }): void {
	const { prototype } = module.default;
	const { renderLine, renderVector, renderSVG, renderWatermark } = prototype;

	prototype.renderLine = function (line, x, y) {
		const doc = this.pdfDocument;
		const before = line._outline ? new Set(outlines(doc)) : undefined;
		const mark = line.inlines[0]?.noon;
		if (mark) asArtifact(doc, () => drawNoon(doc, mark, y + line.getHeight() / 2));
		if (line.inlines.some((inline) => inline.signaturePlace)) widenSignaturePlace(doc, line, x, y);
		groups(line.inlines, (inline) => inline[elementKey]).forEach(({ value: owner, inlines }, i) => {
			const draw = () => renderLine.call(this, part(line, inlines, i === 0), x, y);
			if (owner && firstDrawing(doc, inlines)) asElement(doc, owner, draw);
			else asArtifact(doc, draw);
		});
		addLinks(doc, line, x, y);
		if (!before) return;
		for (const item of outlines(doc)) {
			if (!before.has(item)) {
				item.outlineData.Dest = [doc.page.dictionary, 'XYZ', 0, doc.page.height - y + 6, null];
			}
		}
		doc.outline.options.expanded = true;
	};

	prototype.renderVector = function (vector) {
		asArtifact(this.pdfDocument, () => renderVector.call(this, vector));
	};

	prototype.renderSVG = function (svg) {
		const doc = this.pdfDocument;
		const owner = svg[elementKey];
		const draw = () => renderSVG.call(this, svg);
		if (!owner || owner.drawn) {
			asArtifact(doc, draw);
			return;
		}
		owner.drawn = true;
		const top = doc.page.height - svg.y;
		owner.box = [svg.x, top - svg._height, svg.x + svg._width, top];
		asElement(doc, owner, draw);
	};

	prototype.renderWatermark = function (page) {
		asArtifact(this.pdfDocument, () => renderWatermark.call(this, page));
	};
}
