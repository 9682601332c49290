import { json } from '@sveltejs/kit';
import { limit } from '$lib/server/access/limit';
import { previewDraft } from '$lib/server/calculations/preview';
import { orHttpError } from '$lib/server/http/errors';
import { readJson } from '$lib/server/http/read-json';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ request, locals }) => {
	// Far above what typing causes; a script that hammers is held back.
	await orHttpError(limit(`preview:${locals.person?.id ?? 'nobody'}`, 600, 60));
	return json(await orHttpError(previewDraft(locals.membership, await readJson(request))));
};
