/** Descriptive data of the file. The library writes it into XMP without escaping it; here it is escaped. */
import type { WrittenDocument } from './library';

function escapeXml(text: string): string {
	return text
		.replaceAll('&', '&amp;')
		.replaceAll('<', '&lt;')
		.replaceAll('>', '&gt;')
		.replaceAll('"', '&quot;');
}

/** Makes the XMP packet well-formed whatever title or name it holds, and adds the date of change. */
export function repairMetadata(doc: WrittenDocument): void {
	const host = doc as WrittenDocument & { _addInfo(): void };
	const original = host._addInfo.bind(host);
	host._addInfo = () => {
		const plain = doc.info;
		doc.info = Object.fromEntries(
			Object.entries(plain).map(([key, value]) => [key, typeof value === 'string' ? escapeXml(value) : value])
		);
		try {
			original();
		} finally {
			doc.info = plain;
		}
		const changed = plain.ModDate instanceof Date ? plain.ModDate : undefined;
		if (changed) {
			const stamp = `${changed.toISOString().split('.')[0] ?? ''}Z`;
			doc.appendXML(
				`<rdf:Description rdf:about="" xmlns:xmp="http://ns.adobe.com/xap/1.0/"><xmp:ModifyDate>${stamp}</xmp:ModifyDate></rdf:Description>`
			);
		}
	};
}
