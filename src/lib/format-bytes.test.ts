import { expect, it } from 'vitest';
import { formatBytes } from './format-bytes';

it.each([
	[0, '0 bytes'],
	[999, '999 bytes'],
	[1000, '1 kB'],
	[34_499, '34 kB'],
	[999_499, '999 kB'],
	[999_500, '1.0 MB'],
	[10 * 1024 * 1024, '10.5 MB']
])('writes %d as %s', (bytes, text) => {
	expect(formatBytes(bytes)).toBe(text);
});
