import { orHttpError } from '$lib/server/http/errors';
import { pdfResponse } from '$lib/server/http/pdf-response';
import { sharedPdf } from '$lib/server/sharing/open';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ params, getClientAddress }) => {
	const { name, pdf } = await orHttpError(sharedPdf(params.token, getClientAddress()));
	return pdfResponse(pdf, name, 'attachment');
};
