import { crc32 } from 'node:zlib';
import { longestSide, mostPixels } from './limits';

const signature = Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);

/** Bit depths that each colour type allows (PNG specification, third edition, table 11.1). */
const depths: Readonly<Record<number, readonly number[]>> = {
	0: [1, 2, 4, 8, 16],
	2: [8, 16],
	3: [1, 2, 4, 8],
	4: [8, 16],
	6: [8, 16]
};

const animation = new Set(['acTL', 'fcTL', 'fdAT']);

export function isPng(bytes: Buffer): boolean {
	return bytes.subarray(0, signature.length).equals(signature);
}

function checkHeader(data: Buffer): string | undefined {
	const width = data.readUInt32BE(0);
	const height = data.readUInt32BE(4);
	const allowed = depths[data.readUInt8(9)];
	if (width === 0 || height === 0) return 'The picture has no pixels.';
	if (width > longestSide || height > longestSide || width * height > mostPixels) {
		return `The picture has ${width} x ${height} pixels. Scale it down to at most 50 million.`;
	}
	if (allowed === undefined || !allowed.includes(data.readUInt8(8))) {
		return 'The picture’s header names colours that PNG does not have. Save it again as PNG.';
	}
	if (data.readUInt8(10) !== 0 || data.readUInt8(11) !== 0 || data.readUInt8(12) > 1) {
		return 'The picture’s header asks for a method that PNG does not have. Save it again as PNG.';
	}
	return undefined;
}

/**
 * Walks a PNG's chunks (PNG specification, third edition, section 5) without unpacking anything: header first and
 * within the pixel cap, every checksum right, one still picture, nothing after its end.
 * @returns what is wrong in plain words, or undefined.
 */
export function faultOfPng(bytes: Buffer): string | undefined {
	const broken = 'The picture is damaged or cut short. Save it again as PNG.';
	let at = signature.length;
	let pictureData: 'before' | 'in' | 'after' = 'before';
	let palette = false;
	for (let index = 0; ; index++) {
		if (at + 12 > bytes.length) return broken;
		const length = bytes.readUInt32BE(at);
		if (length > bytes.length - at - 12) return broken;
		const type = bytes.toString('latin1', at + 4, at + 8);
		const data = bytes.subarray(at + 8, at + 8 + length);
		if (!/^[A-Za-z]{2}[A-Z][A-Za-z]$/.test(type)) return broken;
		if (crc32(bytes.subarray(at + 4, at + 8 + length)) !== bytes.readUInt32BE(at + 8 + length)) return broken;
		if (animation.has(type)) return 'The picture is animated. Save one still picture as PNG.';
		if ((index === 0) !== (type === 'IHDR')) return broken;
		if (type === 'IHDR') {
			if (length !== 13) return broken;
			const fault = checkHeader(data);
			if (fault !== undefined) return fault;
			palette = data.readUInt8(9) === 3;
		} else if (type === 'PLTE') {
			if (pictureData !== 'before' || length === 0 || length % 3 !== 0 || length > 768) return broken;
			palette = false;
		} else if (type === 'IDAT') {
			// A palette picture without its palette cannot be drawn; pieces of picture data stand in one row.
			if (palette || pictureData === 'after') return broken;
			pictureData = 'in';
		} else {
			if (pictureData === 'in') pictureData = 'after';
			if (type === 'IEND') {
				if (length !== 0 || pictureData === 'before') return broken;
				const rest = bytes.length - (at + 12);
				return rest === 0 ? undefined : 'Something follows the end of the picture. Save it again as PNG.';
			}
			// A critical chunk that the specification does not know changes the picture in ways nobody can check.
			if (/^[A-Z]/.test(type)) return broken;
		}
		at += 12 + length;
	}
}
