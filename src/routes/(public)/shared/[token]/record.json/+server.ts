import { orHttpError } from '$lib/server/http/errors';
import { sharedRecord } from '$lib/server/sharing/open';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ params, getClientAddress }) => {
	const { name, record } = await orHttpError(sharedRecord(params.token, getClientAddress()));
	return new Response(new Uint8Array(record), {
		headers: {
			'content-type': 'application/json',
			'content-length': String(record.length),
			'content-disposition': `attachment; filename="${name.replace(/[^A-Za-z0-9._-]/g, '-')}"`
		}
	});
};
