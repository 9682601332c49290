import { randomBytes } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createSealer } from './sealing';

const newKey = (id: string): string => `${id}:${randomBytes(32).toString('base64')}`;
const [first, second] = [newKey('first'), newKey('second')];

describe('sealing', () => {
	it('opens what it sealed, whatever the bytes', () => {
		const sealer = createSealer(first);
		fc.assert(
			fc.property(fc.uint8Array({ maxLength: 300 }), fc.string(), (secret, purpose) => {
				const sealed = sealer.seal(secret, purpose);
				expect(sealer.open(sealed, purpose).equals(Buffer.from(secret))).toBe(true);
			})
		);
	});

	it('seals with the newest key and opens with any that is listed', () => {
		const sealed = createSealer(first).seal(Buffer.from('key'), 'a');
		const rotated = createSealer(`${second},${first}`);
		expect(rotated.open(sealed, 'a').toString()).toBe('key');
		expect(rotated.isStale(sealed)).toBe(true);
		expect(rotated.isStale(rotated.seal(Buffer.from('key'), 'a'))).toBe(false);
		expect(() => createSealer(second).open(sealed, 'a')).toThrow(/"first" is not listed/);
	});

	it('never gives the same text twice, and shows nothing of the secret', () => {
		const sealer = createSealer(first);
		const secret = Buffer.from('a private key in plain sight');
		expect(sealer.seal(secret, 'a')).not.toBe(sealer.seal(secret, 'a'));
		expect(Buffer.from(sealer.seal(secret, 'a').split('.')[3] ?? '', 'base64url').includes('private')).toBe(
			false
		);
	});

	it('does not open for another purpose, under another key of the same id, or after a change', () => {
		const sealer = createSealer(first);
		const sealed = sealer.seal(Buffer.from('key'), 'certificate 1');
		expect(() => sealer.open(sealed, 'certificate 2')).toThrow(/does not open/);
		expect(() => createSealer(newKey('first')).open(sealed, 'certificate 1')).toThrow(/does not open/);
		for (const part of [2, 3, 4]) {
			const parts = sealed.split('.');
			const bytes = Buffer.from(parts[part] ?? '', 'base64url');
			bytes.writeUInt8(bytes.readUInt8(0) ^ 1, 0);
			parts[part] = bytes.toString('base64url');
			expect(() => sealer.open(parts.join('.'), 'certificate 1')).toThrow(/does not open/);
		}
		expect(() => sealer.open('v1.first.AA', 'a')).toThrow(/malformed/);
	});

	it('refuses keys that are short, malformed or doubled', () => {
		expect(() => createSealer(`a:${randomBytes(16).toString('base64')}`)).toThrow(/32 bytes/);
		expect(() => createSealer('nothing')).toThrow(/id:base64/);
		expect(() => createSealer(`${first},${first}`)).toThrow(/twice/);
	});
});
