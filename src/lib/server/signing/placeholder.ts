/**
 * The signature field of a report, put into the pdfkit document before it ends, so that the signed file has one
 * single revision. `signPdf` (./sign) fills the two gaps that are left here.
 */

/** Room for the CMS. B-B takes 2.4 kB, B-T 5.5 kB (measured with P-256); a longer chain may ask for more. */
export const reservedBytes = 8192;

/** Stands in each of the three places of ByteRange that are known only when the file is complete. */
export const byteRangeFiller = 9_999_999_999;

/** What is used of a pdfkit reference. */
export interface PdfReference {
	data: Record<string, unknown>;
	compress: boolean;
	write(chunk: string | Buffer): void;
	end(): void;
}

/** What is used of a font that is embedded in the document. */
export interface PdfFont {
	id: string;
	encode(text: string): [string[], unknown];
	ref(): unknown;
}

/** What is used of the pdfkit document (with pdfmake: what `getStream()` gives). */
export interface PdfKitDocument {
	page: { height: number; dictionary: PdfReference; annotations: unknown[] };
	_root: PdfReference;
	ref(data: Record<string, unknown>): unknown;
	endAcroForm(): unknown;
}

export interface SignatureField {
	/** Who signs: the organisation's name. */
	name: string;
	reason: string;
	/** The claimed time of signing; printed to the second. */
	signedAt: Date;
	/** What a screen reader says at the field. */
	tooltip: string;
	/** Key into the structure tree's ParentTree, where the document is tagged. */
	structParent?: number;
	/** Left out, the field has no size and no look. */
	appearance?: {
		/** Left, top, width and height in points from the page's top left corner. */
		rect: readonly [number, number, number, number];
		/** Lines of text, from the top; none leaves the place as the page drew it. */
		lines: readonly string[];
		font: PdfFont;
		fontSize: number;
	};
	/** The page that carries the field; the document's current (with pdfmake: last) page if left out. */
	page?: PdfKitDocument['page'];
	/** Bytes kept free for the CMS. */
	reserve?: number;
}

const text = (words: string): object => Object(words) as object;

const escapeHex = (bytes: readonly string[]): string => `<${bytes.join('')}>`;

/** The content stream of the visible field; text by glyph, since the font is a subset. */
function drawLines(lines: readonly string[], height: number, font: PdfFont, size: number): string {
	const leading = size * 1.35;
	const shown = lines.map((line, i) => {
		const baseline = height - size - i * leading;
		return `1 0 0 1 0 ${baseline.toFixed(2)} Tm ${escapeHex(font.encode(line)[0])} Tj`;
	});
	return ['q', 'BT', `/${font.id} ${String(size)} Tf`, '0 g', ...shown, 'ET', 'Q'].join('\n');
}

/**
 * Adds the one signature field to a document that has none, before `end()`.
 *
 * The widget is ended here: give `structParent` beforehand if the document is tagged, and use the returned widget
 * for the OBJR of its Form element.
 *
 * @returns the references of the widget and of the signature dictionary.
 * @throws Error if the document has a form already.
 */
export function addSignatureField(
	doc: PdfKitDocument,
	field: SignatureField
): { widget: PdfReference; signature: PdfReference } {
	if (doc._root.data.AcroForm !== undefined) throw new Error('The document has a form already.');
	const page = field.page ?? doc.page;
	const ref = (data: Record<string, unknown>): PdfReference => doc.ref(data) as PdfReference;

	const signature = ref({
		Type: 'Sig',
		Filter: 'Adobe.PPKLite',
		SubFilter: 'ETSI.CAdES.detached',
		ByteRange: [0, byteRangeFiller, byteRangeFiller, byteRangeFiller],
		Contents: Buffer.alloc(field.reserve ?? reservedBytes),
		M: field.signedAt,
		Name: text(field.name),
		Reason: text(field.reason)
	});
	signature.end();

	const [left, top, width, height] = field.appearance?.rect ?? [0, page.height, 0, 0];
	const look = ref({
		Type: 'XObject',
		Subtype: 'Form',
		BBox: [0, 0, width, height],
		Resources: field.appearance ? { Font: { [field.appearance.font.id]: field.appearance.font.ref() } } : {}
	});
	look.write(
		field.appearance === undefined || field.appearance.lines.length === 0
			? '% no look of its own'
			: drawLines(field.appearance.lines, height, field.appearance.font, field.appearance.fontSize)
	);
	look.end();

	const bottom = page.height - top - height;
	const widget = ref({
		Type: 'Annot',
		Subtype: 'Widget',
		FT: 'Sig',
		T: text('Signature1'),
		TU: text(field.tooltip),
		// Printed (4) and locked (128).
		F: 132,
		Rect: [left, bottom, left + width, bottom + height],
		P: page.dictionary,
		V: signature,
		AP: { N: look },
		...(field.structParent === undefined ? {} : { StructParent: field.structParent })
	});
	widget.end();
	page.annotations.push(widget);

	// SigFlags 3: signatures exist, and the file may only be appended to.
	const form = ref({ Fields: [widget], SigFlags: 3 });
	form.end();
	doc._root.data.AcroForm = form;
	// pdfkit would end the form a second time and ask for form fonts, which a signature needs none of.
	doc.endAcroForm = () => doc;
	return { widget, signature };
}
