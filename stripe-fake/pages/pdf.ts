/* Text that a PDF string may hold as it is: the rest of Latin-1, and brackets, are escaped. */
const asPdfString = (text: string): string =>
	`(${[...text]
		.map((sign) => {
			const code = sign.codePointAt(0) ?? 63;
			if (code > 255) return sign === '×' ? '\\327' : '?';
			return code < 32 || code > 126 || '()\\'.includes(sign)
				? `\\${code.toString(8).padStart(3, '0')}`
				: sign;
		})
		.join('')})`;

/** A PDF of one page with lines of plain text. */
export function plainPdf(lines: string[]): Uint8Array {
	const text = lines.map((line) => `${asPdfString(line)} Tj T*`).join('\n');
	const content = `BT /F1 11 Tf 16 TL 56 780 Td\n${text}\nET`;
	const parts = [
		'<< /Type /Catalog /Pages 2 0 R >>',
		'<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
		'<< /Type /Page /Parent 2 0 R /MediaBox [0 0 595 842] /Resources << /Font << /F1 5 0 R >> >> /Contents 4 0 R >>',
		`<< /Length ${content.length} >>\nstream\n${content}\nendstream`,
		'<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica /Encoding /WinAnsiEncoding >>'
	];
	let file = '%PDF-1.4\n';
	const offsets = parts.map((part, index) => {
		const offset = file.length;
		file += `${index + 1} 0 obj\n${part}\nendobj\n`;
		return offset;
	});
	const table = file.length;
	file += `xref\n0 ${parts.length + 1}\n0000000000 65535 f \n${offsets
		.map((offset) => `${String(offset).padStart(10, '0')} 00000 n \n`)
		.join('')}trailer\n<< /Size ${parts.length + 1} /Root 1 0 R >>\nstartxref\n${table}\n%%EOF\n`;
	return Buffer.from(file, 'latin1');
}
