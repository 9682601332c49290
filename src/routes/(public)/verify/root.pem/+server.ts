import { publishedRoot } from '$lib/server/verification/published-root';
import type { RequestHandler } from './$types';

/** The service's root certificate, for the command and for readers who keep it. */
export const GET: RequestHandler = async () => {
	const { pem } = await publishedRoot();
	return new Response(pem, {
		headers: {
			'content-type': 'application/x-pem-file',
			'content-disposition': 'attachment; filename="noonmark-root.pem"'
		}
	});
};
