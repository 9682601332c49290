/*
 * A page read by a share link holds its secret in its own address. So that address is told to nobody, is kept by no
 * cache, and is listed by no search engine, whatever the answer is.
 */

const headersOfShared: Readonly<Record<string, string>> = {
	'referrer-policy': 'no-referrer',
	'x-robots-tag': 'noindex, nofollow',
	'cache-control': 'no-store'
};

/** @param path as it stands in the address, perhaps with escapes */
export function isSharedPath(path: string): boolean {
	let plain: string;
	try {
		plain = decodeURI(path);
	} catch {
		plain = path;
	}
	return /^\/shared(?:\/|$)/.test(plain);
}

/** Sets what every answer below /shared carries, over what stands there. */
export function addSharedHeaders(headers: Pick<Headers, 'set'>): void {
	for (const [name, value] of Object.entries(headersOfShared)) headers.set(name, value);
}
