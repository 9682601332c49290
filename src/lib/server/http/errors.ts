import { error } from '@sveltejs/kit';
import {
	ConflictError,
	ForbiddenError,
	GoneError,
	InvalidInputError,
	NotFoundError,
	TooManyRequestsError
} from '../access/errors';
import { noteRefusal } from './refusals';

/** HTTP status of an error that a use case throws on purpose; undefined for a fault of ours. */
export function statusOf(cause: unknown): 400 | 403 | 404 | 409 | 410 | 429 | undefined {
	if (cause instanceof NotFoundError) return 404;
	if (cause instanceof ForbiddenError) return 403;
	if (cause instanceof ConflictError) return 409;
	if (cause instanceof GoneError) return 410;
	if (cause instanceof InvalidInputError) return 400;
	if (cause instanceof TooManyRequestsError) return 429;
	return undefined;
}

/**
 * Awaits a use case for a route: what it throws on purpose becomes SvelteKit's answer with the same words, anything
 * else goes on to the error hook.
 */
export async function orHttpError<T>(work: Promise<T>): Promise<T> {
	try {
		return await work;
	} catch (cause) {
		const status = statusOf(cause);
		if (status === undefined || !(cause instanceof Error)) throw cause;
		noteRefusal(status);
		error(status, cause.message);
	}
}
