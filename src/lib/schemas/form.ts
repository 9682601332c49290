import type { z } from 'zod';

export type FormRead<Output> =
	| { ok: true; data: Output }
	| {
			ok: false;
			/** First fault of each field, in the order of the schema. */
			errors: Record<string, string>;
	  };

/** The texts of a form, by field name; files are left out, and of several values the last one counts. */
export function typedTexts(form: FormData): Record<string, string> {
	const texts: Record<string, string> = {};
	for (const [name, value] of form) if (typeof value === 'string') texts[name] = value;
	return texts;
}

/** Checks a form's texts against a schema. */
export function readForm<Output>(
	schema: z.ZodType<Output>,
	texts: Readonly<Record<string, string>>
): FormRead<Output> {
	const parsed = schema.safeParse(texts);
	if (parsed.success) return { ok: true, data: parsed.data };
	const errors: Record<string, string> = {};
	for (const issue of parsed.error.issues) {
		const field = issue.path.length > 0 ? issue.path.join('.') : 'form';
		errors[field] ??= issue.message;
	}
	return { ok: false, errors };
}
