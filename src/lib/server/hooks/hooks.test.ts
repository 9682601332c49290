import { describe, expect, it } from 'vitest';
import { ownOrigin } from './loopback';
import { refuseForeign } from './same-origin';
import { addSecurityHeaders, letFormsLeadTo } from './security-headers';

const origin = 'https://noonmark.example';

function asked(headers: Record<string, string>, method = 'POST') {
	return { method, headers: new Headers(headers), hasCookies: 'cookie' in headers };
}

describe('refuseForeign', () => {
	it.each([
		['a form of ours', { origin, 'content-type': 'application/x-www-form-urlencoded' }],
		['an upload of ours', { origin, 'content-type': 'multipart/form-data; boundary=x' }],
		['JSON of ours', { origin, 'content-type': 'application/json; charset=utf-8', cookie: 'a=b' }],
		[
			'JSON with the browser vouching',
			{ 'sec-fetch-site': 'same-origin', 'content-type': 'application/json' }
		],
		['a program without cookies', { 'content-type': 'application/json' }],
		['nothing to read', { origin, 'content-length': '0' }]
	])('takes %s', (_what, headers) => {
		expect(refuseForeign(asked(headers), origin)).toBeNull();
	});

	it.each([
		['another origin', { origin: 'https://evil.example', 'content-type': 'application/json' }, 403],
		['an opaque origin', { origin: 'null', 'content-type': 'application/x-www-form-urlencoded' }, 403],
		[
			'a lookalike',
			{ origin: 'https://noonmark.example.evil.example', 'content-type': 'application/json' },
			403
		],
		['plain http', { origin: 'http://noonmark.example', 'content-type': 'application/json' }, 403],
		['another site', { 'sec-fetch-site': 'cross-site', 'content-type': 'application/json' }, 403],
		['a sibling site', { 'sec-fetch-site': 'same-site', origin, 'content-type': 'application/json' }, 403],
		['cookies and no origin', { cookie: 'a=b', 'content-type': 'application/json' }, 403],
		['a form and no origin', { 'content-type': 'application/x-www-form-urlencoded' }, 403],
		['plain text', { origin, 'content-type': 'text/plain', 'content-length': '2' }, 415],
		['upper case', { origin, 'content-type': 'TEXT/PLAIN;charset=utf-8', 'content-length': '2' }, 415],
		['no type at all', { origin, 'content-length': '2' }, 415],
		['a stream of no type', { origin, 'transfer-encoding': 'chunked' }, 415]
	] as const)('refuses %s', (_what, headers, status) => {
		expect(refuseForeign(asked(headers), origin)?.status).toBe(status);
	});

	it.each(['PUT', 'PATCH', 'DELETE'])('looks at %s as well', (method) => {
		expect(refuseForeign(asked({ origin: 'https://evil.example' }, method), origin)?.status).toBe(403);
	});

	it.each(['GET', 'HEAD', 'OPTIONS'])('leaves %s alone', (method) => {
		expect(refuseForeign(asked({ origin: 'https://evil.example' }, method), origin)).toBeNull();
	});
});

describe('ownOrigin', () => {
	const own = 'http://127.0.0.1:3000';
	it('leads from one name of this machine to the other', () => {
		expect(ownOrigin('localhost:3000', own, '/a?b=c')).toBe('http://127.0.0.1:3000/a?b=c');
		expect(ownOrigin('[::1]:3000', own, '/')).toBe('http://127.0.0.1:3000/');
	});
	it.each([
		['the right host', '127.0.0.1:3000', own],
		['another port', 'localhost:8080', own],
		['a stranger', 'evil.example', own],
		['no host', null, own],
		['nonsense', 'a b@c', own],
		['the inner address of a proxy', '127.0.0.1:3000', 'https://noonmark.example']
	])('leaves %s alone', (_what, host, to) => {
		expect(ownOrigin(host, to, '/')).toBeNull();
	});
});

describe('addSecurityHeaders', () => {
	it('covers an answer that has nothing', () => {
		const headers = new Headers();
		addSecurityHeaders(headers, true);
		expect(headers.get('content-security-policy')).toContain("default-src 'none'");
		expect(headers.get('content-security-policy')).toContain("object-src 'none'");
		expect(headers.get('content-security-policy')).toContain("base-uri 'none'");
		expect(headers.get('content-security-policy')).toContain("frame-ancestors 'none'");
		expect(headers.get('x-content-type-options')).toBe('nosniff');
		expect(headers.get('cache-control')).toBe('no-store');
		expect(headers.get('strict-transport-security')).toMatch(/max-age=(\d{8,}); includeSubDomains/);
	});

	it('keeps what the route has set, and states no https on http', () => {
		const headers = new Headers({
			'content-security-policy': "default-src 'self'",
			'cache-control': 'public, max-age=60',
			'referrer-policy': 'no-referrer'
		});
		addSecurityHeaders(headers, false);
		expect(headers.get('content-security-policy')).toBe("default-src 'self'");
		expect(headers.get('cache-control')).toBe('public, max-age=60');
		expect(headers.get('referrer-policy')).toBe('no-referrer');
		expect(headers.has('strict-transport-security')).toBe(false);
	});

	it('lets our own pages alone frame a PDF', () => {
		const headers = new Headers({ 'content-type': 'application/pdf' });
		addSecurityHeaders(headers, true);
		expect(headers.get('content-security-policy')).toContain("frame-ancestors 'self'");
		expect(headers.get('content-security-policy')).toContain("default-src 'none'");
	});
});

describe('letFormsLeadTo', () => {
	it('widens where forms may lead, and nothing else', () => {
		const headers = new Headers({
			'content-security-policy': "default-src 'none'; form-action 'self'; base-uri 'none'"
		});
		letFormsLeadTo(headers, ['https://pay.example', 'https://portal.example']);
		expect(headers.get('content-security-policy')).toBe(
			"default-src 'none'; form-action 'self' https://pay.example https://portal.example; base-uri 'none'"
		);
	});

	it('leaves a policy alone that lets forms lead nowhere, and an answer without one', () => {
		const strict = new Headers({ 'content-security-policy': "form-action 'none'" });
		letFormsLeadTo(strict, ['https://pay.example']);
		expect(strict.get('content-security-policy')).toBe("form-action 'none'");
		const bare = new Headers();
		letFormsLeadTo(bare, ['https://pay.example']);
		expect(bare.has('content-security-policy')).toBe(false);
	});
});
