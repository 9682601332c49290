import { crc32, deflateSync } from 'node:zlib';

/* Small sound files for tests, and the parts to make unsound ones from. */

export const pngSignature = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);

/** A chunk with its length and a right checksum. */
export function pngChunk(type: string, data: Buffer = Buffer.alloc(0)): Buffer {
	const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
	const frame = Buffer.alloc(8 + body.length);
	frame.writeUInt32BE(data.length, 0);
	body.copy(frame, 4);
	frame.writeUInt32BE(crc32(body), 4 + body.length);
	return frame;
}

export function pngHeader(width: number, height: number, depth = 8, colourType = 2): Buffer {
	const data = Buffer.alloc(13);
	data.writeUInt32BE(width, 0);
	data.writeUInt32BE(height, 4);
	data.writeUInt8(depth, 8);
	data.writeUInt8(colourType, 9);
	return pngChunk('IHDR', data);
}

/** One grey-blue pixel; `extra` chunks stand between header and picture data. */
export function smallPng(extra: Buffer[] = []): Buffer {
	return Buffer.concat([
		pngSignature,
		pngHeader(1, 1),
		...extra,
		pngChunk('IDAT', deflateSync(Buffer.from([0, 90, 100, 120]))),
		pngChunk('IEND')
	]);
}

/** An empty page; `text` makes two files differ. */
export function smallPdf(text = ''): Buffer {
	const body = `%PDF-1.7\n% ${text}\n1 0 obj\n<</Type/Catalog/Pages 2 0 R>>\nendobj\n2 0 obj\n<</Type/Pages/Kids[]/Count 0>>\nendobj\n`;
	const table = `xref\n0 3\n0000000000 65535 f \n${[body.indexOf('1 0 obj'), body.indexOf('2 0 obj')]
		.map((at) => `${String(at).padStart(10, '0')} 00000 n \n`)
		.join('')}trailer\n<</Size 3/Root 1 0 R>>\n`;
	return Buffer.from(`${body}${table}startxref\n${body.length}\n%%EOF\n`, 'latin1');
}
