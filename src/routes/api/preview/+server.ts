import { json } from '@sveltejs/kit';
import { previewDraft } from '$lib/server/calculations/preview';
import { orHttpError } from '$lib/server/http/errors';
import { readJson } from '$lib/server/http/read-json';
import type { RequestHandler } from './$types';

export const POST: RequestHandler = async ({ request, locals }) =>
	json(await orHttpError(previewDraft(locals.membership, await readJson(request))));
