const base = 'http://internal.invalid';

/**
 * Where to go after signing in: a path of this service and nothing else.
 * @returns the path with query, or `otherwise` for anything that could lead elsewhere
 */
export function safeReturnTo(wanted: string | null | undefined, otherwise: string): string {
	// Browsers drop tabs and line feeds and read a backslash as a slash, so none of these may be in it.
	if (!wanted || !wanted.startsWith('/') || /[\\\p{Cc}]/u.test(wanted) || wanted.startsWith('//')) {
		return otherwise;
	}
	let url: URL;
	try {
		url = new URL(wanted, base);
	} catch {
		return otherwise;
	}
	const path = url.pathname + url.search + url.hash;
	if (url.origin !== base || path.startsWith('//') || url.pathname === '/sign-out') return otherwise;
	return path;
}
