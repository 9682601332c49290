import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { safeReturnTo } from './return-to';

describe('safeReturnTo', () => {
	it.each(['/dossiers', '/dossiers/1?q=a%20b#c', '/a//b'])('keeps %s', (path) => {
		expect(safeReturnTo(path, '/home')).toBe(path);
	});

	it.each([
		null,
		'',
		'dossiers',
		'//evil.example',
		'/\\evil.example',
		'\\\\evil.example',
		'/\t/evil.example',
		'/.//evil.example',
		'/a/..//evil.example',
		'https://evil.example/',
		'javascript:alert(1)',
		'/sign-out',
		' /dossiers'
	])('refuses %j', (path) => {
		expect(safeReturnTo(path, '/home')).toBe('/home');
	});

	it('never leads to another origin, whatever it is given', () => {
		const piece = fc.constantFrom(
			'/',
			'\\',
			'.',
			'..',
			':',
			'@',
			'%2f',
			'%5c',
			'\t',
			'\n',
			'evil.example',
			'http',
			'?',
			'#'
		);
		fc.assert(
			fc.property(
				fc.oneof(
					fc.array(piece).map((all) => all.join('')),
					fc.string()
				),
				(text) => {
					const origin = 'https://noonmark.example';
					expect(new URL(safeReturnTo(`/${text}`, '/home'), origin).origin).toBe(origin);
					expect(new URL(safeReturnTo(text, '/home'), origin).origin).toBe(origin);
				}
			)
		);
	});
});
