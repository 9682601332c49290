import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { setTestEnvironment } from '../testing/environment';
import { coverEveryAnswer } from './every-answer';
import { addSharedHeaders, isSharedPath } from './shared-pages';

let server: Server;
let address: string;

beforeAll(async () => {
	setTestEnvironment();
	coverEveryAnswer();
	// As the server of files does: a type, a cache, and no thought of anything else.
	server = createServer((request, response) => {
		const own = request.url === '/own' ? { 'referrer-policy': 'strict-origin' } : {};
		response.writeHead(200, { 'content-type': 'text/javascript', 'cache-control': 'max-age=60', ...own });
		response.end('1');
	});
	await new Promise<void>((done) => server.listen(0, '127.0.0.1', done));
	address = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(() => new Promise((done) => server.close(done)));

describe('every answer', () => {
	it('that no hook saw is covered, and keeps its cache', async () => {
		const { headers } = await fetch(`${address}/_app/start.js`);
		expect(headers.get('x-content-type-options')).toBe('nosniff');
		expect(headers.get('cross-origin-resource-policy')).toBe('same-origin');
		expect(headers.get('content-security-policy')).toContain("frame-ancestors 'none'");
		expect(headers.get('strict-transport-security')).toMatch(/^max-age=\d{8}/);
		expect(headers.get('referrer-policy')).toBe('same-origin');
		expect(headers.get('cache-control')).toBe('max-age=60');
		expect(headers.has('x-robots-tag')).toBe(false);
	});

	it('may set a value of its own', async () => {
		expect((await fetch(`${address}/own`)).headers.get('referrer-policy')).toBe('strict-origin');
	});

	it('below /shared tells nobody where it stands', async () => {
		for (const path of ['/shared/token/', '/%73hared/token', '/shared/token?x=1']) {
			const { headers } = await fetch(address + path);
			expect(headers.get('referrer-policy'), path).toBe('no-referrer');
			expect(headers.get('x-robots-tag'), path).toBe('noindex, nofollow');
		}
	});
});

describe('isSharedPath', () => {
	it.each([
		'/shared',
		'/shared/',
		'/shared/abc',
		'/shared/abc/report.pdf',
		'/%73hared/abc',
		'/shared/%E0%A4%A'
	])('takes %s', (path) => expect(isSharedPath(path)).toBe(true));
	it.each(['/', '/sharedness', '/verify/shared', '/reports/shared/x'])('leaves %s', (path) =>
		expect(isSharedPath(path)).toBe(false)
	);
	it('sets its headers over those of the framework', () => {
		const headers = new Headers({ 'referrer-policy': 'same-origin', 'cache-control': 'private, max-age=9' });
		addSharedHeaders(headers);
		expect(Object.fromEntries(headers)).toEqual({
			'referrer-policy': 'no-referrer',
			'x-robots-tag': 'noindex, nofollow',
			'cache-control': 'no-store'
		});
	});
});
