/** `%PDF-` at the very first byte: with anything before it the file may pass for something else as well. */
export function isPdf(bytes: Buffer): boolean {
	return bytes.subarray(0, 5).toString('latin1') === '%PDF-';
}

const tailLength = 2048;

/**
 * A light look at a PDF's frame (ISO 32000-2, 7.5): a known version, a body with objects, and at the end the pointer
 * to a cross-reference within the file and the end mark. The file is kept and handed back, never opened here, so the
 * look need not go deeper.
 * @returns what is wrong in plain words, or undefined.
 */
export function faultOfPdf(bytes: Buffer): string | undefined {
	const broken = 'The PDF is damaged or cut short. Save or download it again.';
	if (!/^%PDF-[12]\.\d[\r\n \t]/.test(bytes.toString('latin1', 0, 9))) return broken;
	const tailAt = Math.max(0, bytes.length - tailLength);
	const tail = bytes.toString('latin1', tailAt);
	const end = /startxref[\r\n\s]+(\d{1,10})[\r\n\s]+%%EOF[\0\s]*$/.exec(tail);
	if (end?.[1] === undefined) return broken;
	if (Number(end[1]) >= tailAt + end.index) return broken;
	if (!/\d\s+\d+\s+obj\b/.test(bytes.toString('latin1'))) return broken;
	return undefined;
}
