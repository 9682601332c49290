/** Text as the layout library takes it: runs in one typeface each, with every character checked for a glyph. */
import type { Phrase } from '$lib/wording/phrase';
import { splitByGlyphs, type FontFamily, type FontStyle } from '$lib/server/typesetting/fonts';

export interface RunStyle {
	font?: FontFamily;
	fontSize?: number;
	bold?: boolean;
	italics?: boolean;
	color?: string;
	sub?: boolean;
	sup?: boolean;
}

export interface Run extends RunStyle {
	text: string;
	linkToDestination?: string;
	link?: string;
	[key: string]: unknown;
}

const defaultFont: FontFamily = 'Noto Serif';

function styleOf(style: RunStyle): FontStyle {
	if (style.bold && style.italics) return 'bolditalics';
	if (style.bold) return 'bold';
	return style.italics ? 'italics' : 'normal';
}

/** Longest piece without a place to break a line; longer ones would push a table off the page. */
const longestWord = 34;

/** Breaks what no reader could break: addresses, hashes and the like, after every so many characters. */
function breakable(text: string): string[] {
	const pieces: string[] = [];
	for (const word of text.split(/(?<=\s)/)) {
		const characters = [...word];
		if (characters.length <= longestWord) pieces.push(word);
		else {
			for (let i = 0; i < characters.length; i += longestWord) {
				pieces.push(characters.slice(i, i + longestWord).join(''));
			}
		}
	}
	return pieces;
}

/** Runs of a text in one style. Line ends of the text stay line ends. */
export function textRuns(text: string, style: RunStyle = {}): Run[] {
	const family = style.font ?? defaultFont;
	const longWords = text.split(/\s/).some((word) => [...word].length > longestWord);
	const pieces = longWords ? breakable(text) : [text];
	return pieces.flatMap((piece) =>
		splitByGlyphs(piece, family, styleOf(style)).map((run) => ({
			...style,
			text: run.text,
			font: run.family
		}))
	);
}

/** Runs of a phrase; `numberOf` gives a cited work its number. */
export function phraseRuns(phrase: Phrase, style: RunStyle, numberOf: (id: string) => number): Run[] {
	return phrase.flatMap((part): Run[] => {
		if (typeof part === 'string') return textRuns(part, style);
		if ('strong' in part) return textRuns(part.strong, { ...style, bold: true });
		const number = numberOf(part.cite);
		return textRuns(`[${number}]`, style).map((run) => ({
			...run,
			linkToDestination: `reference-${number}`
		}));
	});
}
