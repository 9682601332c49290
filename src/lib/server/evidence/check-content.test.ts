import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InvalidInputError } from '../access/errors';
import { pngChunk, pngHeader, pngSignature, smallPdf, smallPng } from '../testing/files';
import { checkContent } from './check-content';
import { largestFile } from './limits';

const refused = (bytes: Buffer): string => {
	try {
		checkContent(bytes);
	} catch (cause) {
		if (cause instanceof InvalidInputError) return cause.fields.file ?? '';
		throw cause;
	}
	return '';
};
const image = pngChunk('IDAT', Buffer.from([0x78, 0x9c, 3, 0, 0, 0, 0, 1]));
const end = pngChunk('IEND');
const png = (...chunks: Buffer[]) => Buffer.concat([pngSignature, ...chunks]);

describe('checkContent', () => {
	it('takes a sound PDF and a sound PNG', () => {
		expect(checkContent(smallPdf())).toBe('application/pdf');
		expect(checkContent(smallPng())).toBe('image/png');
		expect(checkContent(smallPng([pngChunk('tEXt', Buffer.from('Comment\0made by hand'))]))).toBe(
			'image/png'
		);
		const palette = pngChunk('PLTE', Buffer.from([1, 2, 3]));
		expect(checkContent(png(pngHeader(1, 1, 8, 3), palette, image, image, end))).toBe('image/png');
	});

	it('refuses what is neither, whatever it claims to be', () => {
		const others = [
			'<html><script>alert(1)</script></html>',
			'GIF89a;',
			'PK\x03\x04',
			'<svg xmlns="http://www.w3.org/2000/svg" onload="alert(1)"/>',
			'\n%PDF-1.7\n',
			'%!PS-Adobe',
			'\x89PNG'
		];
		for (const other of others)
			expect(refused(Buffer.from(other, 'latin1'))).toMatch(/neither a PDF nor a PNG/);
		expect(refused(Buffer.alloc(0))).toMatch(/not empty/);
		expect(refused(Buffer.concat([smallPdf(), Buffer.alloc(largestFile)]))).toMatch(/10 MB/);
	});

	it('refuses a PDF that is cut short, points outside itself or carries something after its end', () => {
		const sound = smallPdf();
		for (const length of [5, 9, 40, sound.length - 8]) {
			expect(refused(sound.subarray(0, length))).toMatch(/damaged or cut short/);
		}
		const text = sound.toString('latin1');
		expect(refused(Buffer.from(text.replace(/startxref\n\d+/, 'startxref\n99999999'), 'latin1'))).not.toBe(
			''
		);
		expect(refused(Buffer.from(text.replaceAll(' obj', ' abj'), 'latin1'))).not.toBe('');
		expect(refused(Buffer.from(`${text}<script>alert(1)</script>`, 'latin1'))).not.toBe('');
		expect(refused(Buffer.from(text.replace('%PDF-1.7', '%PDF-9.7'), 'latin1'))).not.toBe('');
		expect(checkContent(Buffer.from(`${text}\r\n\0\0`, 'latin1'))).toBe('application/pdf');
	});

	it('caps a picture’s pixels by its header, before anything is unpacked', () => {
		expect(refused(png(pngHeader(50_000, 50_000), image, end))).toMatch(/50000 x 50000 pixels/);
		expect(refused(png(pngHeader(0xffffffff, 1), image, end))).toMatch(/pixels/);
		expect(refused(png(pngHeader(20_000, 2_501), image, end))).toMatch(/pixels/);
		expect(refused(png(pngHeader(0, 5), image, end))).toMatch(/no pixels/);
		expect(checkContent(png(pngHeader(20_000, 2_500), image, end))).toBe('image/png');
	});

	it('refuses animation, foreign critical chunks, wrong order and anything after the end', () => {
		const header = pngHeader(1, 1);
		expect(refused(png(header, pngChunk('acTL', Buffer.alloc(8)), image, end))).toMatch(/animated/);
		expect(refused(png(header, image, pngChunk('fdAT', Buffer.alloc(8)), end))).toMatch(/animated/);
		expect(refused(Buffer.concat([smallPng(), Buffer.from('<html>')]))).toMatch(/follows the end/);
		const unsound = [
			png(header, pngChunk('ABCD'), image, end),
			png(header, pngChunk('abcd'), image, end),
			png(image, header, end),
			png(header, header, image, end),
			png(header, end),
			png(header, image),
			png(header, image, pngChunk('tEXt'), image, end),
			png(pngHeader(1, 1, 8, 3), image, end),
			png(pngHeader(1, 1, 4, 2), image, end),
			png(pngHeader(1, 1, 8, 5), image, end),
			png(header, image, pngChunk('IEND', Buffer.from([1])))
		];
		for (const bytes of unsound) expect(refused(bytes)).not.toBe('');
	});

	it('notices any single changed byte of a PNG, and any cut', () => {
		const sound = smallPng([pngChunk('tEXt', Buffer.from('Title\0Roof'))]);
		fc.assert(
			fc.property(fc.nat(sound.length - 1), fc.integer({ min: 1, max: 255 }), (at, change) => {
				const changed = Buffer.from(sound);
				changed.writeUInt8(changed.readUInt8(at) ^ change, at);
				expect(refused(changed)).not.toBe('');
			})
		);
		for (let length = 0; length < sound.length; length++) {
			expect(refused(sound.subarray(0, length))).not.toBe('');
		}
	});

	it('answers for any bytes behind either signature, and never otherwise than by a refusal', () => {
		fc.assert(
			fc.property(fc.uint8Array({ maxLength: 400 }), fc.boolean(), (bytes, asPng) => {
				const start = asPng ? pngSignature : Buffer.from('%PDF-1.4\n');
				expect(refused(Buffer.concat([start, bytes]))).not.toBe('');
			})
		);
	});

	it('reads a long chain of lying chunk lengths in little time', () => {
		const one = pngChunk('tEXt');
		const many = Buffer.alloc(one.length * 200_000, one);
		const bytes = png(pngHeader(1, 1), many, pngChunk('tEXt').fill(0xff, 0, 4));
		const started = performance.now();
		expect(refused(bytes)).not.toBe('');
		expect(performance.now() - started).toBeLessThan(2_000);
	});
});
