import { error } from '@sveltejs/kit';

/**
 * The body as text, exactly as it came, up to a size; 413 beyond it, before the rest is read.
 * @param most bytes
 */
export async function readText(request: Request, most: number): Promise<string> {
	const parts: Uint8Array[] = [];
	let size = 0;
	if (Number(request.headers.get('content-length') ?? 0) > most) error(413, 'This is too large.');
	const reader = request.body?.getReader();
	for (;;) {
		const read = await reader?.read();
		if (read?.value === undefined) break;
		size += read.value.length;
		if (size > most) {
			await reader?.cancel();
			error(413, 'This is too large.');
		}
		parts.push(read.value);
	}
	return Buffer.concat(parts).toString('utf8');
}
