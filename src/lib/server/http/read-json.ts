import { error } from '@sveltejs/kit';

/** The body as JSON, or 400 in plain words. */
export async function readJson(request: Request): Promise<unknown> {
	try {
		return (await request.json()) as unknown;
	} catch {
		error(400, 'The body is not JSON.');
	}
}
