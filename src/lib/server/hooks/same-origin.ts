import type { Handle } from '@sveltejs/kit';
import { env } from '../env';

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);
const forms = new Set(['application/x-www-form-urlencoded', 'multipart/form-data']);

interface Asked {
	method: string;
	headers: Headers;
	/** The request carries a session cookie or another one of ours. */
	hasCookies: boolean;
}

/**
 * Why a request that changes something is refused, or null. It must come from our own pages: SvelteKit looks at the
 * origin of forms only, so JSON is looked at here, and other types are not taken at all.
 */
export function refuseForeign(asked: Asked, origin: string): { status: 403 | 415; message: string } | null {
	if (safeMethods.has(asked.method)) return null;
	const foreign = { status: 403 as const, message: 'This request does not come from our own pages.' };
	const stated = asked.headers.get('origin');
	const site = asked.headers.get('sec-fetch-site');
	if (stated !== null && stated !== new URL(origin).origin) return foreign;
	if (site !== null && site !== 'same-origin') return foreign;
	const type = (asked.headers.get('content-type') ?? '').split(';')[0]?.trim().toLowerCase() ?? '';
	const hasBody =
		asked.headers.has('transfer-encoding') || Number(asked.headers.get('content-length') ?? 0) > 0;
	if (stated === null && site === null && (forms.has(type) || asked.hasCookies)) return foreign;
	if ((type !== '' || hasBody) && type !== 'application/json' && !forms.has(type)) {
		return { status: 415, message: 'Send this as application/json.' };
	}
	return null;
}

export const sameOrigin: Handle = async ({ event, resolve }) => {
	if (event.isSubRequest) return resolve(event);
	const { method, headers } = event.request;
	const refusal = refuseForeign({ method, headers, hasCookies: headers.has('cookie') }, env().ORIGIN);
	if (refusal === null) return resolve(event);
	return Response.json({ message: refusal.message }, { status: refusal.status });
};
