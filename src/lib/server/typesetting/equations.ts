/**
 * Equations as vector drawings, from the same TeX that the page shows. A fault in the TeX throws: a red word in an
 * issued report would be worse than none.
 */
import { liteAdaptor } from '@mathjax/src/js/adaptors/liteAdaptor.js';
import { RegisterHTMLHandler } from '@mathjax/src/js/handlers/html.js';
import { TeX } from '@mathjax/src/js/input/tex.js';
import '@mathjax/src/js/input/tex/ams/AmsConfiguration.js';
import '@mathjax/src/js/input/tex/base/BaseConfiguration.js';
import { mathjax } from '@mathjax/src/js/mathjax.js';
import { SVG } from '@mathjax/src/js/output/svg.js';
import '@mathjax/src/js/util/asyncLoad/esm.js';
import { MathJaxNewcmFont } from '@mathjax/mathjax-newcm-font/js/svg.js';

export interface EquationDrawing {
	svg: string;
	/** Points. */
	width: number;
	height: number;
}

interface Converter {
	convertPromise(tex: string, options: object): Promise<unknown>;
}

const adaptor = liteAdaptor();
let converter: Converter | undefined;

function open(): Converter {
	if (!converter) {
		RegisterHTMLHandler(adaptor);
		const input = new TeX({
			packages: ['base', 'ams'],
			formatError(_jax: unknown, error: Error) {
				throw error;
			}
		});
		const output = new SVG({ fontCache: 'none', fontData: MathJaxNewcmFont });
		converter = mathjax.document('', { InputJax: input, OutputJax: output }) as unknown as Converter;
	}
	return converter;
}

const cache = new Map<string, string>();
let queue: Promise<unknown> = Promise.resolve();

/** The raw drawing of a TeX string, one at a time: the typesetter keeps state while it loads a part of its font. */
async function raw(tex: string): Promise<string> {
	const known = cache.get(tex);
	if (known !== undefined) return known;
	const job = queue.then(async () => {
		const node = await open().convertPromise(tex, { display: true, em: 16, ex: 8, containerWidth: 1e6 });
		return adaptor.innerHTML(node as Parameters<typeof adaptor.innerHTML>[0]);
	});
	queue = job.catch(() => undefined);
	const svg = await job;
	if (cache.size > 2000) cache.clear();
	cache.set(tex, svg);
	return svg;
}

interface Relation {
	/** `=` or `\\Rightarrow`; empty for what stands before the first. */
	sign: string;
	text: string;
}

/** The sides of an equation at its outer relation signs. */
function relations(tex: string): Relation[] {
	const parts: Relation[] = [{ sign: '', text: '' }];
	let depth = 0;
	for (let i = 0; i < tex.length; i += 1) {
		const character = tex[i] ?? '';
		const last = parts.at(-1);
		if (!last) break;
		const command =
			character === '\\' ? (/^\\(?:[A-Za-z]+|.)/.exec(tex.slice(i))?.[0] ?? character) : character;
		if (command === '\\left' || character === '{') depth += 1;
		if (command === '\\right' || character === '}') depth -= 1;
		if (depth === 0 && (command === '=' || command === '\\Rightarrow'))
			parts.push({ sign: command, text: '' });
		else last.text += command;
		i += command.length - 1;
	}
	return parts;
}

const aligned = (lines: readonly string[]): string =>
	`\\begin{aligned} ${lines.join(' \\\\[3pt] ')} \\end{aligned}`;

/** Ways to break an equation over lines, the least broken first. */
function brokenForms(tex: string): string[] {
	const parts = relations(tex);
	const forms: string[] = [];
	const arrow = parts.findIndex((part) => part.sign === '\\Rightarrow');
	const write = (part: Relation): string => `${part.sign} ${part.text}`;
	const consequence = arrow > 0 ? [`&${parts.slice(arrow).map(write).join(' ')}`] : [];
	const main = arrow > 0 ? parts.slice(0, arrow) : parts;
	const [left, first, ...rest] = main;
	if (!left || !first) return forms;
	if (arrow > 0) forms.push(aligned([`&${main.map(write).join(' ')}`, ...consequence]));
	if (rest.length > 0 && arrow <= 0) {
		forms.push(aligned([`${left.text} &${write(first)}`, ...rest.map((part) => `&${write(part)}`)]));
	}
	forms.push(
		aligned([`&${left.text}`, ...[first, ...rest].map((part) => `&\\quad ${write(part)}`), ...consequence])
	);
	return forms;
}

function measure(svg: string, fontSize: number): { width: number; height: number; viewBox: string } {
	const viewBox = /viewBox="([^"]+)"/.exec(svg)?.[1];
	if (!viewBox) throw new Error('The typesetter drew an equation without a size.');
	const [, , width, height] = viewBox.split(' ').map(Number);
	return { width: ((width ?? 0) / 1000) * fontSize, height: ((height ?? 0) / 1000) * fontSize, viewBox };
}

/**
 * Draws an equation at a font size in points, in ink. One that is too wide is broken at its equality signs, then
 * made smaller, but never below three quarters.
 * @throws Error naming the TeX where it cannot be typeset.
 */
export async function drawEquation(
	tex: string,
	options: { fontSize: number; maxWidth: number; colour: string }
): Promise<EquationDrawing> {
	let svg: string;
	try {
		svg = await raw(tex);
		for (const form of brokenForms(tex)) {
			if (measure(svg, options.fontSize).width <= options.maxWidth) break;
			svg = await raw(form);
		}
	} catch (error) {
		throw new Error(
			`The equation “${tex}” cannot be typeset: ${error instanceof Error ? error.message : ''}`,
			{
				cause: error
			}
		);
	}
	let size = measure(svg, options.fontSize);
	if (size.width > options.maxWidth) {
		const factor = Math.max(0.75, options.maxWidth / size.width);
		size = measure(svg, options.fontSize * factor);
	}
	const body = svg
		.replace(/ (?:data-[a-z-]+|style|role|focusable|aria-[a-z]+)="[^"]*"/g, '')
		.replace(/ width="[^"]*ex"/, ` width="${size.width.toFixed(2)}"`)
		.replace(/ height="[^"]*ex"/, ` height="${size.height.toFixed(2)}"`)
		.replaceAll('currentColor', options.colour);
	return { svg: body, width: size.width, height: size.height };
}
