import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeForm } from './form';

describe('decodeForm', () => {
	it('reads bracketed names of any depth', () => {
		expect(
			decodeForm(
				'mode=payment&line_items[0][price]=price_1&line_items[1][price]=price_2&metadata[a%20b]=%C3%A9&expand%5B0%5D=customer'
			)
		).toEqual({
			mode: 'payment',
			line_items: { 0: { price: 'price_1' }, 1: { price: 'price_2' } },
			metadata: { 'a b': 'é' },
			expand: { 0: 'customer' }
		});
	});

	it('numbers empty brackets in the order of writing', () => {
		expect(decodeForm('expand[]=a&expand[]=b')).toEqual({ expand: { 0: 'a', 1: 'b' } });
	});

	it('keeps an empty text, which clears a field', () => {
		expect(decodeForm('name=&metadata=')).toEqual({ name: '', metadata: '' });
	});

	it('is not led astray by names of the language itself', () => {
		const tree = decodeForm('__proto__[polluted]=yes&constructor=1');
		expect(({} as { polluted?: string }).polluted).toBeUndefined();
		expect(Object.keys(tree)).toEqual(['__proto__', 'constructor']);
	});

	it('gives back whatever was written as fields in brackets', () => {
		const name = fc.stringMatching(/^[a-z_]{1,8}$/).filter((text) => text !== '__proto__');
		fc.assert(
			fc.property(fc.dictionary(name, fc.dictionary(name, fc.string(), { minKeys: 1 })), (given) => {
				const form = new URLSearchParams(
					Object.entries(given).flatMap(([outer, fields]) =>
						Object.entries(fields).map(([inner, text]) => [`${outer}[${inner}]`, text])
					)
				);
				expect(JSON.parse(JSON.stringify(decodeForm(form.toString())))).toEqual(
					JSON.parse(JSON.stringify(given))
				);
			})
		);
	});
});
