import { describe, expect, it } from 'vitest';
import type { Series } from '$lib/calculation/types';
import { figureSpec } from '$lib/figures';
import { palette } from '$lib/figures/palette';
import { drawForDocument, drawForDownload, drawForPage, measureFigureText } from './draw';

const xs = Array.from({ length: 10 }, (_, i) => i);
const series: Series = {
	x: { id: 'x', name: 'zenith angle', unit: '°', values: xs },
	curves: [
		{
			id: 'a',
			name: 'T ≤ limit',
			unit: '°C',
			role: 'sunlit',
			values: xs.map((x) => -x * 3),
			low: xs.map((x) => -x * 3 - 1),
			high: xs.map((x) => -x * 3 + 1)
		},
		{ id: 'b', name: 'shade', unit: '°C', role: 'shade', values: xs.map((x) => x - 60) }
	]
};
const spec = () =>
	figureSpec(series, { width: 460, height: 140, yName: 'temperature', measure: measureFigureText });

describe('a figure drawn on the server', () => {
	it('is exactly as wide as asked and the same each time, also side by side', async () => {
		const [first, second] = await Promise.all([drawForDocument(spec()), drawForDocument(spec())]);
		expect(second).toBe(first);
		expect(first).toMatch(/<svg[^>]* width="460"/);
		expect(first).not.toContain('clip-path');
	});

	it('has real minus signs, and borrows a character that its face lacks', async () => {
		const svg = await drawForDocument(spec());
		expect(svg).toMatch(/>−\d+<\/text>/);
		expect(svg).toContain('<tspan font-family="Noto Sans Math">≤</tspan>');
	});

	it('follows the page: variables instead of colours, one image with an escaped name', async () => {
		const svg = await drawForPage(spec(), 'A "name" & <more>');
		expect(svg).toContain('var(--sun)');
		expect(svg).toContain('var(--shade)');
		for (const colour of Object.values(palette)) expect(svg).not.toContain(colour);
		expect(svg).toContain('role="img" aria-label="A &quot;name&quot; &amp; &lt;more&gt;"');
		expect(svg).not.toMatch(/ style="/);
	});

	it('stands on its own as a download', async () => {
		const svg = await drawForDownload(spec(), 'Finding');
		expect(svg).toContain('<title>Finding</title>');
		expect(svg).toContain('#ffffff');
	});
});
