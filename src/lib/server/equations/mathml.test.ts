import { describe, expect, it } from 'vitest';
import { methods } from '$lib/methods';
import { texToMathml } from './mathml';

describe('texToMathml', () => {
	it('typesets in a line of its own or within a sentence', () => {
		expect(texToMathml('T_\\mathrm{ss}', true)).toMatch(
			/^<math[^>]* display="block"[^>]*>.*<msub>.*<\/math>$/
		);
		expect(texToMathml('T_\\mathrm{ss}', false)).not.toMatch(/display="block"/);
	});

	it.each([
		'\\unknown{x}',
		'\\frac{1}{2',
		'\\href{javascript:alert(1)}{x}',
		'\\includegraphics{x}',
		'<b>x</b>$'
	])('throws for %s, and shows none of it', (tex) => {
		expect(() => texToMathml(tex, true)).toThrow(/cannot be typeset/);
	});

	it('never passes markup through', () => {
		const markup = texToMathml('\\text{<script>alert(1)</script>}', true);
		expect(markup).not.toMatch(/<script/);
		expect(markup).toMatch(/&lt;script/);
	});

	it.each(methods.map((method) => [method.id, method] as const))(
		'typesets every symbol and equation of %s',
		(_, method) => {
			const texts = [
				...method.inputs.flatMap((input) => ('symbol' in input ? [input.symbol] : [])),
				...method.outputs.map(({ symbol }) => symbol),
				...method.equations.map(({ tex }) => tex)
			];
			expect(texts.length).toBeGreaterThan(0);
			for (const tex of texts) expect(texToMathml(tex, true)).toMatch(/^<math/);
		}
	);
});
