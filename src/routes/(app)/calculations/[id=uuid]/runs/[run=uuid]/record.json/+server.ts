import { error } from '@sveltejs/kit';
import { getRun } from '$lib/server/calculations/runs';
import { orHttpError } from '$lib/server/http/errors';
import type { RequestHandler } from './$types';

/** The record as it was hashed, byte for byte. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const run = await orHttpError(getRun(locals.membership, params.run));
	if (run.record === null || run.calculationId !== params.id) error(404, 'This record does not exist.');
	return new Response(run.record, {
		headers: {
			'content-type': 'application/json',
			'content-disposition': `attachment; filename="record-${run.id.slice(0, 8)}.json"`
		}
	});
};
