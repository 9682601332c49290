import type { Handle } from '@sveltejs/kit';
import { isInSight, isKindInSight } from '../access/sight';

const named = /^\/\(app\)\/(?:api\/)?([a-z]+)\/\[id=uuid\]/;
const message = 'This page does not exist, or you have no access to it.';

/**
 * What an address names is looked up before anything is done to it: whoever may not see it is told that it is not there,
 * and not that their role allows no such change. The use cases check again, and each reading is theirs alone.
 */
export const sight: Handle = async ({ event, resolve }) => {
	const { request, route, params, locals } = event;
	const [, kind = ''] = named.exec(route.id ?? '') ?? [];
	const { id } = params;
	if (request.method === 'GET' || locals.membership === null || id === undefined || !isKindInSight(kind))
		return resolve(event);
	if (await isInSight(locals.membership, kind, id)) return resolve(event);
	const { headers } = request;
	// A form sent by script takes this shape; another caller the message alone; a browser without script, a page.
	if (headers.get('x-sveltekit-action') === 'true')
		return Response.json({ type: 'error', error: { message } }, { status: 404 });
	if (headers.get('accept')?.includes('text/html') !== true)
		return Response.json({ message }, { status: 404 });
	const html =
		'<!doctype html><html lang="en-GB"><head><meta charset="utf-8"><title>Not found · Noonmark</title></head>' +
		`<body><main><h1>Not found</h1><p>${message}</p><p><a href="/">To the start</a></p></main></body></html>`;
	return new Response(html, { status: 404, headers: { 'content-type': 'text/html; charset=utf-8' } });
};
