/** A path with where to go afterwards; the path alone where that is empty. */
export function withReturn(path: string, returnTo: string): string {
	if (returnTo === '') return path;
	return `${path}${path.includes('?') ? '&' : '?'}returnTo=${encodeURIComponent(returnTo)}`;
}
