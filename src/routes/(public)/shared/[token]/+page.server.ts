import { orHttpError } from '$lib/server/http/errors';
import { openShared } from '$lib/server/sharing/open';
import type { PageServerLoad } from './$types';

/** An address with a slash at its end is the same page: a redirect would be one more answer that knows the token. */
export const trailingSlash = 'ignore';

export const load: PageServerLoad = async ({ params, request, getClientAddress }) => ({
	shared: await orHttpError(
		openShared(params.token, { address: getClientAddress(), counted: request.method === 'GET' })
	)
});
