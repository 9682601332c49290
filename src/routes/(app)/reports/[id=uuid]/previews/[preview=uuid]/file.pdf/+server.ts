import { orHttpError } from '$lib/server/http/errors';
import { pdfResponse } from '$lib/server/http/pdf-response';
import { previewFile } from '$lib/server/reports/preview';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async ({ locals, params }) =>
	pdfResponse(await orHttpError(previewFile(locals.membership, params.preview)), 'preview.pdf', 'inline');
