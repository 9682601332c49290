/** Ways to tamper with a signed report, for the tests: each gives a new file and leaves the original alone. */

export interface Range {
	/** Offset of `<`. */
	gapStart: number;
	/** Offset behind `>`. */
	gapEnd: number;
	/** Offset of the key ByteRange. */
	at: number;
}

export function rangeOf(pdf: Buffer): Range {
	const match = /\/ByteRange \[0 (\d+) (\d+) \d+\]/.exec(pdf.toString('latin1'));
	if (!match) throw new Error('The file is not signed.');
	return { gapStart: Number(match[1]), gapEnd: Number(match[2]), at: match.index };
}

export function cmsOf(pdf: Buffer): Buffer {
	const { gapStart, gapEnd } = rangeOf(pdf);
	const room = Buffer.from(pdf.toString('latin1', gapStart + 1, gapEnd - 1), 'hex');
	return room.subarray(0, 4 + room.readUInt16BE(2));
}

export function withCms(pdf: Buffer, cms: Buffer): Buffer {
	const { gapStart, gapEnd } = rangeOf(pdf);
	const out = Buffer.from(pdf);
	out.write(cms.toString('hex').padEnd(gapEnd - gapStart - 2, '0'), gapStart + 1, 'latin1');
	return out;
}

export function flip(bytes: Buffer, at: number, bit = 1): Buffer {
	const out = Buffer.from(bytes);
	out.writeUInt8(out.readUInt8(at) ^ bit, at);
	return out;
}

/** Writes another ByteRange into the room of the old one. */
export function withRange(pdf: Buffer, numbers: readonly number[]): Buffer {
	const { at } = rangeOf(pdf);
	const end = pdf.indexOf('/Contents', at);
	const out = Buffer.from(pdf);
	out.write(`/ByteRange [${numbers.join(' ')}]`.padEnd(end - at - 1, ' '), at, 'latin1');
	return out;
}

const offsetFor = (offset: number): string => `${String(offset).padStart(10, '0')} 00000 n \n`;

/** Appends a revision that redefines one object, with a table of its own that points back at the last one. */
export function appendRevision(pdf: Buffer, number: number, body: string): Buffer {
	const text = pdf.toString('latin1');
	const previous = text
		.slice(text.lastIndexOf('startxref') + 9)
		.trim()
		.split('\n')[0];
	const trailer = text.slice(text.lastIndexOf('trailer'));
	const root = /\/Root (\d+ 0 R)/.exec(trailer)?.[1] ?? '';
	const size = /\/Size (\d+)/.exec(trailer)?.[1] ?? '';
	const object = `${String(number)} 0 obj\n${body}\nendobj\n`;
	const table = `xref\n${String(number)} 1\n${offsetFor(pdf.length)}`;
	const end = `trailer\n<< /Size ${size} /Root ${root} /Prev ${String(previous)} >>\n`;
	const start = `startxref\n${String(pdf.length + object.length)}\n%%EOF\n`;
	return Buffer.concat([pdf, Buffer.from(object + table + end + start, 'latin1')]);
}

/** Draws another number over the page by redefining its content stream. */
export function replacePageText(pdf: Buffer, words: string): Buffer {
	const number = Number(/\/Contents (\d+) 0 R/.exec(pdf.toString('latin1'))?.[1]);
	const drawing = `BT /F1 12 Tf 72 700 Td (${words}) Tj ET`;
	return appendRevision(
		pdf,
		number,
		`<< /Length ${String(drawing.length)} >>\nstream\n${drawing}\nendstream`
	);
}

/** Appends a second signature dictionary that claims the whole file up to itself. */
export function appendSignature(pdf: Buffer): Buffer {
	const cms = cmsOf(pdf).toString('hex');
	const next = Number(/\/Size (\d+)/.exec(pdf.toString('latin1', pdf.lastIndexOf('trailer')))?.[1]);
	return appendRevision(
		pdf,
		next,
		`<< /Type /Sig /Filter /Adobe.PPKLite /SubFilter /ETSI.CAdES.detached /ByteRange [0 10 20 30] /Contents <${cms}> >>`
	);
}

/**
 * Signature wrapping: moves the second signed part to the end and puts other content into the widened gap.
 * What was hashed stays byte for byte the same.
 */
export function wrapGap(pdf: Buffer): Buffer {
	const { gapStart, gapEnd } = rangeOf(pdf);
	const tail = pdf.subarray(gapEnd);
	const filler = Buffer.from('\n% content of a stranger in the gap\n', 'latin1');
	const moved = Buffer.concat([pdf.subarray(0, gapEnd), filler, tail]);
	return withRange(moved, [0, gapStart, gapEnd + filler.length, tail.length]);
}
