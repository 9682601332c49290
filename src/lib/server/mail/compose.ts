import { env } from '../env';
import type { Mail } from './transport';

export interface Recipient {
	/** Empty where it is not known. */
	name: string;
	email: string;
}

/** Absolute address of a page, from the configured origin and never from a request. */
export function linkTo(path: string): string {
	return new URL(path, env().ORIGIN).href;
}

function escaped(text: string): string {
	const entities: Record<string, string> = {
		'&': '&amp;',
		'<': '&lt;',
		'>': '&gt;',
		'"': '&quot;',
		"'": '&#39;'
	};
	return text.replace(/[&<>"']/g, (character) => entities[character] ?? character);
}

/** A mail in plain text and HTML from the same paragraphs; `link` stands alone after the first of them. */
export function compose(
	to: Recipient,
	subject: string,
	paragraphs: readonly string[],
	link?: { label: string; href: string }
): Mail {
	const [first = '', ...rest] = paragraphs;
	const greeting = to.name === '' ? 'Hello,' : `Hello ${to.name},`;
	const closing = `Noonmark, ${new URL(env().ORIGIN).host}`;
	const text = [greeting, first, ...(link ? [link.href] : []), ...rest, closing].join('\n\n') + '\n';
	const p = (inner: string) => `<p style="margin:0 0 1em">${inner}</p>`;
	const html = [
		'<!doctype html><html lang="en-GB"><head><meta charset="utf-8"><title>',
		escaped(subject),
		'</title></head><body style="margin:0;padding:24px;background:#fbfaf5;color:#1a1d23;',
		'font:16px/1.55 \'Noto Serif\',Georgia,serif"><div style="max-width:36em;border-left:1px solid #1a1d23;',
		'padding-left:20px">',
		p(escaped(greeting)),
		p(escaped(first)),
		link === undefined
			? ''
			: p(`<a style="color:#23406e" href="${escaped(link.href)}">${escaped(link.label)}</a>`) +
				p(`<span style="font-size:13px;color:#5a5f68;word-break:break-all">${escaped(link.href)}</span>`),
		...rest.map((paragraph) => p(escaped(paragraph))),
		p(`<span style="color:#5a5f68">${escaped(closing)}</span>`),
		'</div></body></html>'
	].join('');
	return { to: { name: to.name, address: to.email }, subject, text, html };
}
