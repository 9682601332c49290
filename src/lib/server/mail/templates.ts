import { env } from '../env';
import type { Mail } from './transport';

interface Recipient {
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
function compose(
	to: Recipient,
	subject: string,
	paragraphs: readonly string[],
	link?: { label: string; href: string }
): Mail {
	const [first = '', ...rest] = paragraphs;
	const greeting = `Hello ${to.name},`;
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

const notYou = 'If this was not you, do nothing: without the link nothing happens.';

export function confirmationMail(to: Recipient, token: string, hours: number): Mail {
	return compose(
		to,
		'Confirm your address for Noonmark',
		[
			'Somebody, most likely you, signed up to Noonmark with this address. Follow this link to confirm it:',
			`The link works once and for ${hours} hours. You will be asked for the password that you chose.`,
			notYou
		],
		{ label: 'Confirm this address', href: linkTo(`/confirm/${token}`) }
	);
}

export function alreadyRegisteredMail(to: Recipient): Mail {
	return compose(
		to,
		'You already have a Noonmark account',
		[
			'Somebody, most likely you, tried to sign up to Noonmark with this address, which already has an account. You can sign in here:',
			`If you do not know your password any more, choose a new one: ${linkTo('/reset')}`,
			'If this was not you, do nothing: your account is as it was.'
		],
		{ label: 'Sign in', href: linkTo('/sign-in') }
	);
}

export function resetMail(to: Recipient, token: string, hours: number): Mail {
	return compose(
		to,
		'Choose a new password for Noonmark',
		[
			'Somebody, most likely you, asked for a new password for your Noonmark account. Choose one here:',
			`The link works once and for ${hours === 1 ? 'one hour' : `${hours} hours`}. A new password signs you out everywhere.`,
			notYou
		],
		{ label: 'Choose a new password', href: linkTo(`/reset/${token}`) }
	);
}

export function passwordChangedMail(to: Recipient): Mail {
	return compose(
		to,
		'Your Noonmark password was changed',
		[
			'The password of your Noonmark account was changed just now. If that was you, nothing is left to do. If not, choose a new one at once:'
		],
		{ label: 'Choose a new password', href: linkTo('/reset') }
	);
}
