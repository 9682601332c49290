import type { Sent } from './http';

/*
 * Requests that another site could make a reader's browser send, cookies and all: from another origin, from none, and
 * with the content types that a browser sends without asking first, written in ways that have slipped past checks
 * before (CVE-2023-29003: text/plain; CVE-2023-29008: letters of another case).
 */

export interface Variant {
	name: string;
	/** Headers set, or taken away where undefined. */
	headers: Record<string, string | undefined>;
	answer: string;
}

const elsewhere = 'https://elsewhere.example';

export function variantsFor(address: string): Variant[] {
	const refused = (name: string, headers: Variant['headers']): Variant => ({ name, headers, answer: '403' });
	const odd = (name: string, type: string | undefined): Variant => ({
		name,
		headers: { origin: address, 'content-type': type },
		answer: '415'
	});
	return [
		refused('no origin', { origin: undefined }),
		refused('another origin', { origin: elsewhere }),
		refused('an opaque origin', { origin: 'null' }),
		refused('a lookalike', { origin: `${address}.elsewhere.example` }),
		refused('another port', { origin: 'http://127.0.0.1:1' }),
		refused('https of the same host', { origin: address.replace('http:', 'https:') }),
		refused('another site by its fetch header', { origin: undefined, 'sec-fetch-site': 'cross-site' }),
		refused('a sibling site by its fetch header', { 'sec-fetch-site': 'same-site' }),
		refused('a form of another origin', {
			origin: elsewhere,
			'content-type': 'application/x-www-form-urlencoded'
		}),
		refused('a form in capitals and no origin', {
			origin: undefined,
			'content-type': 'APPLICATION/X-WWW-FORM-URLENCODED'
		}),
		refused('an upload and no origin', {
			origin: undefined,
			'content-type': 'Multipart/Form-Data; boundary=x'
		}),
		refused('plain text of another origin', { origin: elsewhere, 'content-type': 'text/plain' }),
		refused('plain text in capitals and no origin', {
			origin: undefined,
			'content-type': 'TEXT/PLAIN; charset=utf-8'
		}),
		refused('JSON of another origin', { origin: elsewhere, 'content-type': 'application/json' }),
		refused('JSON and no origin', { origin: undefined, 'content-type': 'application/json' }),
		refused('no type and no origin', { origin: undefined, 'content-type': undefined }),
		odd('plain text of ours', 'text/plain'),
		odd('plain text of ours in capitals', 'Text/Plain;charset=UTF-8'),
		odd('a form and plain text at once', 'text/plain; application/x-www-form-urlencoded'),
		odd('a type of nobody', 'application/x-nobody')
	];
}

export function asVariant(sent: Sent, { headers }: Variant): Sent {
	const all: Record<string, string | undefined> = { ...sent.headers, ...headers };
	return {
		...sent,
		headers: Object.fromEntries(
			Object.entries(all).filter((one): one is [string, string] => one[1] !== undefined)
		),
		// A type needs something that it is of.
		body: sent.body === undefined || sent.body.length === 0 ? Buffer.from('a=b') : sent.body
	};
}

/** The same address asked for by GET, which must change nothing; a page shows itself, an endpoint has no such method. */
export function asGet({ path, headers }: Sent): Sent {
	const kept = Object.entries(headers).filter(([name]) => name !== 'content-type' && name !== 'origin');
	return { method: 'GET', path, headers: Object.fromEntries(kept) };
}
