/* Small sound files for uploads. */

/** One white pixel. */
export const smallPng = Buffer.from(
	'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAQAAAC1HAwCAAAAC0lEQVR42mNk+A8AAQUBAScY42YAAAAASUVORK5CYII=',
	'base64'
);

/** One empty page. */
export function smallPdf(): Buffer {
	const objects = [
		'<< /Type /Catalog /Pages 2 0 R >>',
		'<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
		'<< /Type /Page /Parent 2 0 R /MediaBox [0 0 200 200] >>'
	];
	let text = '%PDF-1.7\n';
	const offsets = objects.map((object, i) => {
		const at = text.length;
		text += `${i + 1} 0 obj\n${object}\nendobj\n`;
		return at;
	});
	const table = offsets.map((at) => `${String(at).padStart(10, '0')} 00000 n \n`).join('');
	const size = objects.length + 1;
	text += `xref\n0 ${size}\n0000000000 65535 f \n${table}trailer\n<< /Size ${size} /Root 1 0 R >>\n`;
	return Buffer.from(`${text}startxref\n${text.indexOf('xref\n0')}\n%%EOF\n`, 'latin1');
}
