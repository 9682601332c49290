import { error, json } from '@sveltejs/kit';
import { z } from 'zod';
import { saveDraft } from '$lib/server/calculations/change';
import { orHttpError } from '$lib/server/http/errors';
import { readJson } from '$lib/server/http/read-json';
import type { RequestHandler } from './$types';

const body = z.strictObject({ draft: z.unknown(), baseVersion: z.int().positive() });

export const PUT: RequestHandler = async ({ request, locals, params }) => {
	const parsed = body.safeParse(await readJson(request));
	if (!parsed.success) error(400, 'Send a draft and the version it started from.');
	const version = await orHttpError(saveDraft(locals.membership, params.id, parsed.data));
	return json({ version });
};
