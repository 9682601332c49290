/** Draws a figure on the server: no browser, no canvas, the same bytes for the same numbers. */
import * as vega from 'vega';
import { compile, type TopLevelSpec } from 'vega-lite';
import { cssVariables, palette, type PaletteName } from '$lib/figures/palette';
import { splitByGlyphs, textWidth } from '$lib/server/typesetting/fonts';

interface TextItem {
	fontSize?: number;
	fontWeight?: string | number;
}

/* Without a canvas the drawing library guesses widths, and a drawing comes out up to 20 % too wide. */
const metrics = vega as unknown as {
	textMetrics: { width: (item: TextItem, text: unknown) => number };
};
metrics.textMetrics.width = (item, text) => measureFigureText(String(text ?? ''), item.fontSize ?? 11);

/** Width of a figure's text in pixels. */
export function measureFigureText(text: string, fontSize: number): number {
	return textWidth(text, fontSize, 'Noto Sans');
}

let queue: Promise<unknown> = Promise.resolve();

/** One drawing at a time: the library numbers its parts in one count per process. */
function toSvg(spec: TopLevelSpec): Promise<string> {
	const drawing = queue.then(() => drawAlone(spec));
	queue = drawing.catch(() => undefined);
	return drawing;
}

async function drawAlone(spec: TopLevelSpec): Promise<string> {
	/* Ids count on over the life of the process; starting anew keeps the bytes the same. */
	(vega as unknown as { resetSVGDefIds: () => void }).resetSVGDefIds();
	const view = new vega.View(vega.parse(compile(spec).spec), { renderer: 'none', logLevel: vega.Warn });
	try {
		return tidy(await view.toSVG());
	} finally {
		view.finalize();
	}
}

/** Drops the roles of single marks (the whole drawing is one image) and digits nobody can see. */
function tidy(svg: string): string {
	return svg
		.replace(/ (?:role|aria-[a-z]+|class)="[^"]*"/g, '')
		.replace(/(\d+\.\d{2})\d+/g, '$1')
		.replace(/ stroke-dasharray=""/g, '');
}

/** Characters that Noto Sans lacks are set in Noto Sans Math, named in the drawing itself. */
function withFallbackFonts(svg: string): string {
	return svg.replace(/>([^<>]+)<\/text>/g, (whole, text: string) => {
		const runs = splitByGlyphs(text, 'Noto Sans');
		if (runs.every((run) => run.family === 'Noto Sans')) return whole;
		const inner = runs
			.map((run) =>
				run.family === 'Noto Sans' ? run.text : `<tspan font-family="${run.family}">${run.text}</tspan>`
			)
			.join('');
		return `>${inner}</text>`;
	});
}

/** For a document: colours as numbers, typefaces by the document's own names. */
export async function drawForDocument(spec: TopLevelSpec): Promise<string> {
	return withFallbackFonts(await toSvg(spec));
}

function escapeAttribute(text: string): string {
	return text
		.replaceAll('&', '&amp;')
		.replaceAll('"', '&quot;')
		.replaceAll('<', '&lt;')
		.replaceAll('>', '&gt;');
}

/**
 * For the page: colours are the page's CSS variables, so that the drawing follows the reader's scheme and print, and
 * the whole is one image with a name.
 */
export async function drawForPage(spec: TopLevelSpec, label: string): Promise<string> {
	let svg = await toSvg(spec);
	for (const name of Object.keys(palette) as PaletteName[]) {
		svg = svg.replaceAll(`"${palette[name]}"`, `"${cssVariables[name]}"`);
	}
	return svg
		.replace(/^<svg [^>]*?viewBox="([^"]*)"[^>]*>/, (_whole, viewBox: string) => {
			const [, , width, height] = viewBox.split(/[ ,]+/);
			return (
				`<svg xmlns="http://www.w3.org/2000/svg" class="figure-drawing" viewBox="${viewBox}" ` +
				`width="${width}" height="${height}" role="img" aria-label="${escapeAttribute(label)}">`
			);
		})
		.replaceAll('font-family="Noto Sans"', 'font-family="\'Noto Sans\', sans-serif"');
}

/** For a download that stands on its own: colours as numbers, a title for a screen reader, a paper ground. */
export async function drawForDownload(spec: TopLevelSpec, label: string): Promise<string> {
	const svg = await toSvg({ ...spec, background: '#ffffff' } as TopLevelSpec);
	const title = `<title>${escapeAttribute(label)}</title>`;
	return svg.replace(
		/^<svg ([^>]*)>/,
		(_whole, attributes: string) => `<svg ${attributes} role="img">${title}`
	);
}
