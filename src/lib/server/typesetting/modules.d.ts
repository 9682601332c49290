/* Parts used of libraries that ship no types of their own. */
declare module 'fontkit' {
	export interface Glyph {
		advanceWidth: number;
	}
	export interface GlyphRun {
		advanceWidth: number;
		glyphs: Glyph[];
	}
	export interface Font {
		unitsPerEm: number;
		ascent: number;
		descent: number;
		hasGlyphForCodePoint(codePoint: number): boolean;
		glyphForCodePoint(codePoint: number): Glyph;
		layout(text: string): GlyphRun;
	}
	export function openSync(path: string): Font;
}
