/** Renders a report's model as PDF: the same model gives the same bytes, on any machine. */
import { recordAttachment, recordFileName, type ReportModel } from '$lib/report';
import { addSignatureField, type PdfKitDocument } from '$lib/server/signing/placeholder';
import { templateById } from '../../../../../report-templates';
import { documentWords as words } from '../../../../../report-templates/shared/wording';
import { colours, DocumentKit, page, sizes, type Node } from './kit';
import { layoutLibrary, type WrittenDocument, type WrittenPage } from './library';
import { headingAlone, keepHeadings } from './keep-together';
import { repairMetadata } from './metadata';
import { structureState } from './renderer';
import { buildStructure, element, type Structure } from './structure';
import { writeStructure } from './structure-writer';

export interface SignatureRequest {
	/** Who signs: the organisation's name. */
	name: string;
	/** Why it is signed, as the signature says. */
	reason: string;
	/** The claimed time of signing. */
	time: Date;
	/** Bytes kept free for the signature. */
	reserve?: number;
}

export interface RenderOptions {
	/** Leaves the gap of one signature in the file; `signPdf` fills it. */
	signature?: SignatureRequest;
	/** Marks every page as a draft: no signature, no code. */
	watermark?: boolean;
}

/** A date that a draft without any date is given, so that its bytes do not depend on the clock. */
const noDate = '2000-01-01T00:00:00Z';

function fixedDate(model: ReportModel, signature: SignatureRequest | undefined): Date {
	if (signature) return signature.time;
	return new Date(model.dates.issue ?? model.dates.calculation ?? model.dates.inputData ?? noDate);
}

/** ISO instant without fractions of a second, in UTC. */
function isoSecond(date: Date): string {
	return `${date.toISOString().split('.')[0] ?? ''}Z`;
}

interface Placed extends WrittenDocument {
	signaturePlace?: { page: WrittenPage; left: number; top: number; right: number; bottom: number };
}

function placeSignature(
	doc: Placed,
	model: ReportModel,
	signature: SignatureRequest,
	structure: Structure
): void {
	const place = doc.signaturePlace;
	if (!place) throw new Error('The template leaves no place for the signature.');
	const pdf = doc as unknown as PdfKitDocument;
	const tooltip = words.signatureTooltip(model.organisation.name);
	const form = element('Form', structure.signatureParent, { alt: tooltip });
	const { widget } = addSignatureField(pdf, {
		name: signature.name,
		reason: signature.reason,
		signedAt: signature.time,
		tooltip,
		structParent: structureState(doc).annotate(form),
		page: place.page as unknown as PdfKitDocument['page'],
		...(signature.reserve === undefined ? {} : { reserve: signature.reserve }),
		appearance: {
			rect: [place.left, place.top, place.right - place.left, place.bottom - place.top],
			lines: [],
			font: (
				doc as unknown as {
					_font: NonNullable<Parameters<typeof addSignatureField>[1]['appearance']>['font'];
				}
			)._font,
			fontSize: sizes.small
		}
	});
	form.children.push({ page: place.page.dictionary, annotation: widget });
}

/** Copies the mark of the signature's paragraph onto its runs, which is what reaches the drawing. */
function markSignatureRuns(node: Node): Node {
	if (node.signaturePlace === true && Array.isArray(node.text)) {
		return { ...node, text: node.text.map((run: object) => ({ ...run, signaturePlace: true })) };
	}
	return node;
}

/**
 * The PDF of a report.
 * @throws UnprintableTextError for a character that no shipped typeface has; Error for an unknown template.
 */
export async function renderReport(model: ReportModel, options: RenderOptions = {}): Promise<Buffer> {
	const template = templateById(model.template);
	if (!template) throw new Error(`There is no report template “${model.template}”.`);
	if (options.signature && options.watermark) throw new Error('A draft is not signed.');
	if (options.signature && !model.verification) {
		throw new Error('An issued report needs its verification address and code.');
	}
	const draft = options.watermark === true;
	const kit = new DocumentKit(model);
	const layout = await template.layout(kit, model, {
		draft,
		signedAt: options.signature ? isoSecond(options.signature.time) : null
	});
	const structure = buildStructure(layout.content.map(markSignatureRuns));
	const date = fixedDate(model, options.signature);
	const title = `${template.kind} ${model.number}, ${words.revision(model.revision)}: ${model.title}`;
	const definition = {
		content: keepHeadings(structure.content),
		header: layout.header,
		footer: layout.footer,
		background: layout.background,
		pageSize: 'A4',
		pageMargins: [page.left, page.top, page.right, page.bottom],
		defaultStyle: { font: 'Noto Serif', fontSize: sizes.body, color: colours.ink },
		version: '1.7',
		subset: 'PDF/A-3b',
		tagged: true,
		displayTitle: true,
		language: model.language,
		info: {
			title,
			author: model.author.name,
			subject: model.text.question.trim() || model.title,
			creator: model.organisation.name,
			producer: 'Noonmark',
			creationDate: date,
			modDate: date
		},
		files: {
			[recordFileName]: {
				src: `data:application/json;base64,${Buffer.from(recordAttachment(draft ? { ...model, verification: null } : model), 'utf8').toString('base64')}`,
				name: recordFileName,
				type: 'application/json',
				relationship: 'Data',
				description: 'Computation record: request and result of every calculation',
				creationDate: date,
				modifiedDate: date
			}
		},
		...(draft
			? {
					watermark: {
						text: words.draftMark,
						font: 'Noto Sans',
						color: colours.soft,
						opacity: 0.13,
						bold: true
					}
				}
			: {}),
		pageBreakBefore: headingAlone
	};
	const pdf = layoutLibrary().createPdf(definition, { bufferPages: true });
	const doc: Placed = await pdf.getStream();
	repairMetadata(doc);
	if (options.signature) placeSignature(doc, model, options.signature, structure);
	writeStructure(doc, structure.root, structureState(doc));
	return pdf.getBuffer();
}
