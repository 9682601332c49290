import type { Method } from '../methods/types';

/** Where a method's default comes from, as words: the work that an id names, or the words themselves. */
export function defaultSourceText(method: Pick<Method, 'citations'>, source: string): string {
	return method.citations.find(({ id }) => id === source)?.text ?? source;
}
