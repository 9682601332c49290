/**
 * The layout library, set up once: our fonts as files, no access to the network or to any other file, and its known
 * faults put right (each is named where it is).
 */
import { createRequire } from 'node:module';
import { fontFile, fontTable, openFont } from '$lib/server/typesetting/fonts';
import { patchRenderer } from './renderer';

const require = createRequire(import.meta.url);

/** What is used of the document while it is written. */
export interface WrittenDocument {
	page: WrittenPage;
	info: Record<string, unknown>;
	outline: { options: Record<string, unknown> };
	metadata: unknown;
	_fontFamilies: Record<string, EmbeddedFont>;
	_fontCount: number;
	_font: EmbeddedFont;
	_pageBuffer: WrittenPage[];
	appendXML(xml: string, newline?: boolean): void;
	[key: string]: unknown;
}

export interface WrittenPage {
	height: number;
	width: number;
	dictionary: { data: Record<string, unknown> };
	annotations: unknown[];
	[key: string]: unknown;
}

interface EmbeddedFont {
	font: unknown;
	ascender: number;
	descender: number;
	lineGap: number;
	id: string;
	name: string;
	constructor: new (document: unknown, font: unknown, id: string) => EmbeddedFont;
}

export interface OutputDocument {
	getStream(): Promise<WrittenDocument>;
	getBuffer(): Promise<Buffer>;
}

interface Library {
	setFonts(fonts: unknown): void;
	setUrlAccessPolicy(policy: (url: string) => boolean): void;
	setLocalAccessPolicy(policy: (path: string) => boolean): void;
	createPdf(definition: unknown, options?: unknown): OutputDocument;
}

interface FontHost {
	prototype: {
		font(src: unknown, family?: unknown, size?: unknown): unknown;
	};
}

let library: Library | undefined;

/** Parsed faces by file, shared by all documents of the process: reading them anew took most of the time. */
const parsedFaces = new Map<string, { face: unknown; constructor: EmbeddedFont['constructor'] }>();

const mathFace = fontFile('Noto Sans Math', 'normal');

/** The fallback face is taller than the others: one borrowed character would push its line away from the next. */
function evenHeight(font: EmbeddedFont | undefined): void {
	if (!font) return;
	const sans = openFont('Noto Sans');
	const scale = 1000 / sans.unitsPerEm;
	font.ascender = sans.ascent * scale;
	font.descender = sans.descent * scale;
	font.lineGap = 0;
}

function shareParsedFaces(): void {
	const { default: PDFDocument } = require('pdfmake/js/PDFDocument.js') as { default: FontHost };
	const original = PDFDocument.prototype.font;
	PDFDocument.prototype.font = function (
		this: WrittenDocument,
		src: unknown,
		family?: unknown,
		size?: unknown
	) {
		if (typeof src === 'string' && family === undefined && !this._fontFamilies[src]) {
			const known = parsedFaces.get(src);
			if (known) {
				this._fontCount += 1;
				this._fontFamilies[src] = new known.constructor(this, known.face, `F${this._fontCount}`);
			} else {
				original.call(this, src, family, size);
				const opened = this._font;
				parsedFaces.set(src, { face: opened.font, constructor: opened.constructor });
			}
			if (src === mathFace) evenHeight(this._fontFamilies[src]);
		}
		return original.call(this, src, family, size);
	};
}

/** The library, ready to lay out a document. */
export function layoutLibrary(): Library {
	if (!library) {
		const opened = require('pdfmake') as Library;
		const fonts = fontTable();
		const files = new Set(Object.values(fonts).flatMap((styles) => Object.values(styles)));
		opened.setFonts(fonts);
		opened.setUrlAccessPolicy(() => false);
		opened.setLocalAccessPolicy((path) => files.has(path));
		shareParsedFaces();
		patchRenderer(require('pdfmake/js/Renderer.js') as Parameters<typeof patchRenderer>[0]);
		library = opened;
	}
	return library;
}
