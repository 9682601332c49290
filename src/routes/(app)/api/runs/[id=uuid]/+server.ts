import { json } from '@sveltejs/kit';
import { runProgress } from '$lib/server/calculations/runs';
import { orHttpError } from '$lib/server/http/errors';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
	json(await orHttpError(runProgress(locals.membership, params.id)));
