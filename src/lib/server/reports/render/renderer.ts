/**
 * Changes to how laid-out lines are drawn: bookmarks that land on their heading (the library points them at the
 * page's top right corner), ticks and notch on the noon line, and the place of the signature.
 */
import { colours, page as pageSize } from './kit';
import type { WrittenDocument, WrittenPage } from './library';

interface Inline {
	noon?: 'tick' | 'notch';
	signaturePlace?: boolean;
	[key: string]: unknown;
}

interface Line {
	inlines: Inline[];
	_outline?: unknown;
	getHeight(): number;
	getWidth(): number;
}

interface OutlineItem {
	outlineData: Record<string, unknown>;
	children: OutlineItem[];
	options: Record<string, unknown>;
}

interface DrawingDocument extends WrittenDocument {
	save(): DrawingDocument;
	restore(): DrawingDocument;
	moveTo(x: number, y: number): DrawingDocument;
	lineTo(x: number, y: number): DrawingDocument;
	closePath(): DrawingDocument;
	lineWidth(w: number): DrawingDocument;
	stroke(colour: string): DrawingDocument;
	fill(colour: string): DrawingDocument;
	opacity(value: number): DrawingDocument;
	/** Where the visible signature goes: the union of the lines of its paragraph. */
	signaturePlace?: { page: WrittenPage; left: number; top: number; right: number; bottom: number };
}

interface RendererPrototype {
	pdfDocument: DrawingDocument;
	renderLine(this: RendererPrototype, line: Line, x: number, y: number): void;
}

function lastOutlines(doc: DrawingDocument): OutlineItem[] {
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

/** Applies the changes to the library's renderer; once per process. */
export function patchRenderer(module: { default: { prototype: RendererPrototype } }): void {
	const { prototype } = module.default;
	const original = prototype.renderLine;
	prototype.renderLine = function (line, x, y) {
		const doc = this.pdfDocument;
		const before = line._outline ? new Set(lastOutlines(doc)) : undefined;
		const first = line.inlines[0];
		if (first?.noon) drawNoon(doc, first.noon, y + line.getHeight() / 2);
		if (line.inlines.some((inline) => inline.signaturePlace)) widenSignaturePlace(doc, line, x, y);
		original.call(this, line, x, y);
		if (!before) return;
		for (const item of lastOutlines(doc)) {
			if (!before.has(item)) {
				item.outlineData.Dest = [doc.page.dictionary, 'XYZ', 0, doc.page.height - y + 6, null];
			}
		}
		doc.outline.options.expanded = true;
	};
}
