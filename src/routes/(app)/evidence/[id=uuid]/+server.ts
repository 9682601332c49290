import { downloadEvidence } from '$lib/server/evidence/download';
import { orHttpError } from '$lib/server/http/errors';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) => {
	const { content, headers } = await orHttpError(downloadEvidence(locals.membership, params.id));
	return new Response(new Uint8Array(content), { headers });
};
