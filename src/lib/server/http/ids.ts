import { match } from '../../../params/uuid';

/** An id given in a query or a form; undefined where there is none or it has not the form of one. */
export function idIn(given: URLSearchParams | FormData, name: string): string | undefined {
	const value = given.get(name);
	return typeof value === 'string' && match(value) ? value : undefined;
}
