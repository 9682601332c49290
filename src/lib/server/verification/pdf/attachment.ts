import type { PdfStructure } from './structure';
import { PdfError, PdfString, type PdfDictionary, type PdfValue } from './values';

const maxNodes = 64;

/** Name and file specification of every attached file (name tree, ISO 32000-1, 7.9.6). */
function listAttachments(pdf: PdfStructure, root: PdfDictionary): [string, PdfValue][] {
	const found: [string, PdfValue][] = [];
	const open: PdfDictionary[] = [root];
	for (let visited = 0; ; visited++) {
		const node = open.pop();
		if (node === undefined) return found;
		if (visited > maxNodes) throw new PdfError('The list of attached files is too large.');
		const names = pdf.resolve(node.get('Names'));
		if (Array.isArray(names)) {
			for (let i = 0; i + 1 < names.length; i += 2) {
				const name = pdf.resolve(names[i]);
				if (name instanceof PdfString) found.push([name.text, names[i + 1] ?? null]);
			}
		}
		const kids = pdf.resolve(node.get('Kids'));
		if (Array.isArray(kids) && kids.length <= maxNodes)
			open.push(...kids.map((kid) => pdf.dictionary(kid, 'list of attached files')));
	}
}

/**
 * The content of the one attached file of that name.
 * @returns undefined where there is none.
 * @throws PdfError if there are two, or it cannot be read.
 */
export function readAttachment(pdf: PdfStructure, name: string): Buffer | undefined {
	const names = pdf.resolve(pdf.catalog.get('Names'));
	const tree = names instanceof Map ? pdf.resolve(names.get('EmbeddedFiles')) : null;
	if (!(tree instanceof Map)) return undefined;
	const matches = listAttachments(pdf, tree).filter(([found]) => found === name);
	if (matches.length > 1) throw new PdfError(`The file "${name}" is attached more than once.`);
	const [match] = matches;
	if (match === undefined) return undefined;
	const specification = pdf.dictionary(match[1], 'attached file');
	const files = pdf.dictionary(specification.get('EF'), 'attached file');
	return pdf.stream(files.get('F'));
}
