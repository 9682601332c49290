import { json } from '@sveltejs/kit';
import { orHttpError } from '$lib/server/http/errors';
import { getPreview } from '$lib/server/reports/preview';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
	json(await orHttpError(getPreview(locals.membership, params.id)));
