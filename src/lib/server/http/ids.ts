import { error } from '@sveltejs/kit';
import { match } from '../../../params/uuid';

/** An id given in a query or a form; undefined where there is none or it has not the form of one. */
export function idIn(given: URLSearchParams | FormData, name: string): string | undefined {
	const value = given.get(name);
	return typeof value === 'string' && match(value) ? value : undefined;
}

/** The same where a form cannot do without it. @throws 400 */
export function requireId(form: FormData, name: string): string {
	const id = idIn(form, name);
	if (id === undefined) error(400, 'The form named nothing to change. Open the page again.');
	return id;
}
