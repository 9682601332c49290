/**
 * Colours of figures. A drawing for a document carries the light values; a drawing for the page carries the CSS
 * variables instead, so that it follows the reader's scheme and print.
 */
export const palette = {
	ink: '#1a1d23',
	soft: '#5a5f68',
	rule: '#d9d5c8',
	sun: '#9c4f0c',
	sunFill: '#bd6f15',
	sunWash: '#fbf0dc',
	shade: '#23406e',
	shadeFill: '#6d86b3',
	shadeWash: '#e8edf5'
} as const;

export type PaletteName = keyof typeof palette;

/** CSS variable that stands for a colour of the palette on the page. */
export const cssVariables: Readonly<Record<PaletteName, string>> = {
	ink: 'var(--ink)',
	soft: 'var(--soft)',
	rule: 'var(--rule)',
	sun: 'var(--sun)',
	sunFill: 'var(--sun-fill)',
	sunWash: 'var(--sun-wash)',
	shade: 'var(--shade)',
	shadeFill: 'var(--shade-fill)',
	shadeWash: 'var(--shade-wash)'
};

export type CurveRole = 'sunlit' | 'shade' | 'neutral';

/** Stroke of a curve and fill of its coverage band by its role. */
export function roleColours(role: CurveRole): { line: string; band: string } {
	if (role === 'sunlit') return { line: palette.sun, band: palette.sunFill };
	if (role === 'shade') return { line: palette.shade, band: palette.shadeFill };
	return { line: palette.ink, band: palette.soft };
}
