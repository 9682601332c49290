import { error, fail, type ActionFailure } from '@sveltejs/kit';
import type { z } from 'zod';
import { InvalidInputError, TooManyRequestsError } from '../access/errors';
import { PaymentsAwayError } from '../billing/errors';
import { MailNotSentError } from '../mail/transport';
import { statusOf } from './errors';
import { noteRefusal } from './refusals';

/** What a form gets back when it could not be taken: faults by field (`form` for none), and what was typed. */
export interface FormFault {
	errors: Record<string, string>;
	values: Record<string, string>;
}

/** Text fields of a form, except those that are never sent back to the page. */
export function typedValues(form: FormData, except: readonly string[] = []): Record<string, string> {
	const values: Record<string, string> = {};
	for (const [name, value] of form) {
		if (typeof value === 'string' && !except.includes(name)) values[name] = value;
	}
	return values;
}

/** A text field as it was typed, with line ends as everywhere else in the service; empty where there is none. */
export function textOf(form: FormData, name: string): string {
	const value = form.get(name);
	return typeof value === 'string' ? value.replace(/\r\n/g, '\n') : '';
}

/** Reads a form by a schema: its data, or the answer that lists every fault. A field given several times is an array. */
export function readForm<Schema extends z.ZodType>(
	form: FormData,
	schema: Schema,
	except: readonly string[] = []
): { data: z.infer<Schema> } | { fault: ActionFailure<FormFault> } {
	const input: Record<string, unknown> = {};
	for (const name of new Set(form.keys())) {
		const all = form.getAll(name);
		input[name] = all.length === 1 ? all[0] : all;
	}
	const parsed = schema.safeParse(input);
	if (parsed.success) return { data: parsed.data };
	const errors: Record<string, string> = {};
	for (const issue of parsed.error.issues) {
		const field = issue.path.length === 0 ? 'form' : String(issue.path[0]);
		errors[field] ??= issue.message;
	}
	return { fault: fail(400, { errors, values: typedValues(form, except) }) };
}

/**
 * Awaits a use case for a form action. What the person can mend comes back as a fault of the form with everything typed;
 * what they may not see or do becomes SvelteKit's error answer; anything else goes on to the error hook.
 * @param event only its `setHeaders` is used, for Retry-After
 */
export async function orFormFault<T>(
	event: { setHeaders: (headers: Record<string, string>) => void },
	work: Promise<T>,
	values: Record<string, string> = {}
): Promise<{ data: T } | { fault: ActionFailure<FormFault> }> {
	try {
		return { data: await work };
	} catch (cause) {
		if (cause instanceof MailNotSentError || cause instanceof PaymentsAwayError) {
			return { fault: fail(503, { errors: { form: cause.message }, values }) };
		}
		const status = statusOf(cause);
		if (status === undefined || !(cause instanceof Error)) throw cause;
		noteRefusal(status);
		if (status === 403 || status === 404) error(status, cause.message);
		if (cause instanceof TooManyRequestsError) {
			event.setHeaders({ 'retry-after': String(cause.retryAfter) });
		}
		const fields = cause instanceof InvalidInputError ? cause.fields : {};
		const errors = Object.keys(fields).length > 0 ? { ...fields } : { form: cause.message };
		return { fault: fail(status, { errors, values }) };
	}
}
