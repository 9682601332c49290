import { z } from 'zod';

/*
 * The environment, read once and checked. Not SvelteKit's `$env`: the worker process and the scripts load this too.
 */
const schema = z.object({
	DATABASE_URL: z.url({ protocol: /^postgres(ql)?$/ }),
	/** Where people reach the service: links in mails and reports are made from it, never from a request's header. */
	ORIGIN: z.url({ protocol: /^https?$/ }),
	AUTH_SECRET: z.string().min(32),
	/** Seals private keys: `id:base64` of 32 bytes; several, newest first, separated by commas. */
	SEALING_KEYS: z.string().min(1),
	SMTP_URL: z.url({ protocol: /^smtps?$/ }),
	MAIL_FROM: z.string().default('Noonmark <post@noonmark.example>'),
	LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
	/** `development` shows the local mail reader and the demo's sign-ins. */
	NOONMARK_MODE: z.enum(['production', 'development']).default('production'),
	/** Read page of the local SMTP sink, in development only. */
	MAIL_READER_URL: z.url().optional()
});

export type Env = z.infer<typeof schema>;

let read: Env | undefined;

/** @throws Error that names every variable that is missing or malformed. */
export function env(): Env {
	if (read === undefined) {
		const parsed = schema.safeParse(process.env);
		if (!parsed.success) {
			const faults = parsed.error.issues.map((i) => `${i.path.join('.')}: ${i.message}`);
			throw new Error(`The environment is not complete. ${faults.join('; ')}`);
		}
		read = parsed.data;
	}
	return read;
}
