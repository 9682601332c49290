import type { Handle } from '@sveltejs/kit';
import { env } from '../env';

const loopback = new Set(['localhost', '127.0.0.1', '[::1]']);

/**
 * Where a request by another name of this machine belongs: forms are refused unless they come from ORIGIN, so the page
 * that holds them must be read from there. Only between loopback names on the same port; a proxy's inner address is
 * left alone.
 * @returns the address to go to, or null
 */
export function ownOrigin(host: string | null, origin: string, path: string): string | null {
	if (host === null || !/^[\w.:[\]-]+$/.test(host) || !URL.canParse(`http://${host}`)) return null;
	const asked = new URL(`http://${host}`);
	const own = new URL(origin);
	const differs = asked.hostname !== own.hostname && asked.port === own.port;
	if (!differs || !loopback.has(asked.hostname) || !loopback.has(own.hostname)) return null;
	return own.origin + path;
}

export const redirectToOrigin: Handle = async ({ event, resolve }) => {
	const { request, url } = event;
	if (request.method === 'GET' && !['/healthz', '/readyz'].includes(url.pathname) && !event.isSubRequest) {
		const location = ownOrigin(request.headers.get('host'), env().ORIGIN, url.pathname + url.search);
		if (location !== null) return new Response(null, { status: 307, headers: { location } });
	}
	return resolve(event);
};
