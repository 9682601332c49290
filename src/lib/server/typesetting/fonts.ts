/**
 * The typefaces of documents and figures: unsplit TrueType files shipped with the application. System fonts are
 * never used: a distribution's copies are older and lack the minus sign.
 */
import { createRequire } from 'node:module';
import * as fontkit from 'fontkit';

const require = createRequire(import.meta.url);

export type FontFamily = 'Noto Serif' | 'Noto Sans' | 'Noto Sans Mono' | 'Noto Sans Math';
export type FontStyle = 'normal' | 'bold' | 'italics' | 'bolditalics';

const packages: Record<FontFamily, { folder: string; file: string; styles: Record<FontStyle, string> }> = {
	'Noto Serif': {
		folder: 'noto-serif',
		file: 'NotoSerif',
		styles: {
			normal: '400Regular',
			bold: '600SemiBold',
			italics: '400Regular_Italic',
			bolditalics: '600SemiBold_Italic'
		}
	},
	'Noto Sans': {
		folder: 'noto-sans',
		file: 'NotoSans',
		styles: {
			normal: '400Regular',
			bold: '600SemiBold',
			italics: '400Regular_Italic',
			bolditalics: '600SemiBold_Italic'
		}
	},
	'Noto Sans Mono': {
		folder: 'noto-sans-mono',
		file: 'NotoSansMono',
		styles: {
			normal: '400Regular',
			bold: '600SemiBold',
			italics: '400Regular',
			bolditalics: '600SemiBold'
		}
	},
	'Noto Sans Math': {
		folder: 'noto-sans-math',
		file: 'NotoSansMath',
		styles: {
			normal: '400Regular',
			bold: '400Regular',
			italics: '400Regular',
			bolditalics: '400Regular'
		}
	}
};

const styles: readonly FontStyle[] = ['normal', 'bold', 'italics', 'bolditalics'];

/** File of a face, from the installed font packages. */
export function fontFile(family: FontFamily, style: FontStyle): string {
	const { folder, file, styles: names } = packages[family];
	const name = names[style];
	return require.resolve(`@expo-google-fonts/${folder}/${name}/${file}_${name}.ttf`);
}

/** Font table in the form the layout library takes: families as keys, files as values. */
export function fontTable(): Record<FontFamily, Record<FontStyle, string>> {
	const families = Object.keys(packages) as FontFamily[];
	return Object.fromEntries(
		families.map((family) => [
			family,
			Object.fromEntries(styles.map((style) => [style, fontFile(family, style)])) as Record<FontStyle, string>
		])
	) as Record<FontFamily, Record<FontStyle, string>>;
}

const parsed = new Map<string, fontkit.Font>();

/** A parsed face, read once per process. */
export function openFont(family: FontFamily, style: FontStyle = 'normal'): fontkit.Font {
	const file = fontFile(family, style);
	let font = parsed.get(file);
	if (!font) {
		font = fontkit.openSync(file);
		parsed.set(file, font);
	}
	return font;
}

const widths = new Map<string, number>();

/** Width of a text as it will be set, in the unit of `fontSize`; characters that the face lacks take the fallback's. */
export function textWidth(
	text: string,
	fontSize: number,
	family: FontFamily,
	style: FontStyle = 'normal'
): number {
	const key = `${family}|${style}|${text}`;
	let perPoint = widths.get(key);
	if (perPoint === undefined) {
		perPoint = splitByGlyphs(text, family, style).reduce((sum, run) => {
			const font = openFont(run.family, run.family === family ? style : 'normal');
			return sum + font.layout(run.text).advanceWidth / font.unitsPerEm;
		}, 0);
		if (widths.size > 5000) widths.clear();
		widths.set(key, perPoint);
	}
	return perPoint * fontSize;
}

/** A character that no shipped typeface can print. */
export class UnprintableTextError extends Error {
	readonly character: string;

	constructor(character: string, context: string) {
		const code = character.codePointAt(0)?.toString(16).toUpperCase().padStart(4, '0') ?? '';
		super(
			`The character “${character}” (U+${code}) in “${context}” cannot be printed: none of the report’s typefaces has it. ` +
				'Write it in Latin, Greek or Cyrillic letters, or leave it out.'
		);
		this.name = 'UnprintableTextError';
		this.character = character;
	}
}

export interface GlyphRunText {
	text: string;
	family: FontFamily;
}

/** Characters that order, join or vary others and print nothing themselves; every face may do without them. */
const invisible: readonly (readonly [number, number])[] = [
	[0x200b, 0x200f],
	[0x202a, 0x202e],
	[0x2060, 0x2069],
	[0xfe00, 0xfe0f],
	[0xfeff, 0xfeff]
];

function isInvisible(code: number): boolean {
	return invisible.some(([low, high]) => code >= low && code <= high);
}

/**
 * Splits a text into runs that one typeface can print: the wanted one, or Noto Sans Math for what it lacks. Throws
 * where neither has a glyph, since a missing glyph would print as an empty box without any warning.
 */
export function splitByGlyphs(text: string, family: FontFamily, style: FontStyle = 'normal'): GlyphRunText[] {
	const main = openFont(family, style);
	const runs: GlyphRunText[] = [];
	for (const character of text) {
		const code = character.codePointAt(0) ?? 0;
		if (isInvisible(code)) continue;
		const control = character === '\n' || character === '\t';
		let wanted: FontFamily = family;
		if (!control && !main.hasGlyphForCodePoint(code)) {
			if (!openFont('Noto Sans Math').hasGlyphForCodePoint(code)) {
				throw new UnprintableTextError(character, excerpt(text, character));
			}
			wanted = 'Noto Sans Math';
		}
		const last = runs.at(-1);
		if (last && last.family === wanted) last.text += character;
		else runs.push({ text: character, family: wanted });
	}
	return runs;
}

function excerpt(text: string, character: string): string {
	const at = text.indexOf(character);
	const start = Math.max(0, at - 20);
	return text.slice(start, at + 20);
}
