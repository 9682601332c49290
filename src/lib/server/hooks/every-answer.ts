import { subscribe } from 'node:diagnostics_channel';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { env } from '../env';
import { addSecurityHeaders } from './security-headers';
import { addSharedHeaders, isSharedPath } from './shared-pages';

/*
 * Files of the build, redirects to an address without a slash at its end, and the framework's own refusal of forms
 * from other sites are answered before any hook. Node.js announces each request before it is handled at all; the
 * headers are set then, and whatever answers later may still set stricter ones.
 */

interface Announced {
	request: IncomingMessage;
	response: ServerResponse;
}

/** Gives an answer that nobody has begun its headers. Caching is left to whoever answers. */
export function prepareAnswer({ request, response }: Announced, https: boolean): void {
	const headers = new Headers({ 'cache-control': 'left to whoever answers' });
	addSecurityHeaders(headers, https);
	headers.delete('cache-control');
	if (isSharedPath((request.url ?? '').split('?')[0] ?? '')) addSharedHeaders(headers);
	for (const [name, value] of headers) response.setHeader(name, value);
}

/** Has every answer of this process's web server prepared so. */
export function coverEveryAnswer(): void {
	const https = new URL(env().ORIGIN).protocol === 'https:';
	subscribe('http.server.request.start', (message) => {
		prepareAnswer(message as Announced, https);
	});
}
