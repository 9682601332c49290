import type { z } from 'zod';
import { InvalidInputError } from '../access/errors';

/** Faults of a form by field, the first of each. */
export function faultsOf(error: z.ZodError): InvalidInputError {
	const faults: Record<string, string> = {};
	for (const { path, message } of error.issues) faults[String(path[0] ?? 'form')] ??= message;
	return new InvalidInputError('Please look at this again.', faults);
}
