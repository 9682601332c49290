import { figureFile } from '$lib/server/calculations/figure-file';
import { orHttpError } from '$lib/server/http/errors';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) => {
	const { body, type, name } = await orHttpError(
		figureFile(locals.membership, params.id, params.run, params.file)
	);
	return new Response(body, {
		headers: { 'content-type': type, 'content-disposition': `attachment; filename="${name}"` }
	});
};
