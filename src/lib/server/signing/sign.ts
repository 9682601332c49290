import { createHash } from 'node:crypto';
import { buildCms, type Signer } from './cms';
import { byteRangeFiller } from './placeholder';

const filler = String(byteRangeFiller);
const byteRangeGap = Buffer.from(`/ByteRange [0 ${filler} ${filler} ${filler}]`, 'latin1');

function onlyIndexOf(bytes: Buffer, part: Buffer, from = 0): number {
	const at = bytes.indexOf(part, from);
	if (at < 0) throw new Error('The document holds no signature field to fill.');
	if (bytes.indexOf(part, at + 1) >= 0) throw new Error('The document holds more than one signature field.');
	return at;
}

/** Where the hexadecimal Contents token stands: offsets of `<` and behind `>`. */
function findContents(bytes: Buffer, from: number): { start: number; end: number } {
	const key = Buffer.from('/Contents <', 'latin1');
	const at = bytes.indexOf(key, from);
	const end = bytes.indexOf(0x3e, at) + 1;
	const start = at + key.length - 1;
	const token = at < 0 || end === 0 ? '' : bytes.toString('latin1', start, end);
	if (!/^<(00)+>$/.test(token)) throw new Error('The document holds no room for a signature.');
	return { start, end };
}

/**
 * Signs a PDF that holds the field of `addSignatureField`: PAdES B-B, the whole file covered except the signature
 * itself. The length of the file does not change.
 *
 * @throws Error if the field is missing, is there twice, or is too small for the CMS.
 */
export async function signPdf(unsigned: Uint8Array, signer: Signer): Promise<Buffer> {
	const bytes = Buffer.from(unsigned);
	const rangeAt = onlyIndexOf(bytes, byteRangeGap);
	const { start, end } = findContents(bytes, rangeAt);
	const range = `/ByteRange [0 ${String(start)} ${String(end)} ${String(bytes.length - end)}]`;
	bytes.write(range.padEnd(byteRangeGap.length, ' '), rangeAt, 'latin1');

	const digest = createHash('sha256').update(bytes.subarray(0, start)).update(bytes.subarray(end)).digest();
	const cms = await buildCms(digest, signer);
	if (cms.length * 2 > end - start - 2) {
		throw new Error(
			`The signature takes ${String(cms.length)} bytes; the field keeps ${String((end - start - 2) / 2)} free.`
		);
	}
	bytes.write(cms.toString('hex'), start + 1, 'latin1');
	return bytes;
}
