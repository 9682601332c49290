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
	/** Secret key of the payment service; test and live keys are told apart by it. */
	STRIPE_SECRET_KEY: z.string().regex(/^[rs]k_(test|live)_\w+$/),
	/** Signing secrets of the webhook, newest first, separated by commas while one is being replaced. */
	STRIPE_WEBHOOK_SECRET: z.string().regex(/^whsec_\w+(,whsec_\w+)*$/),
	/** Where the payment service's API answers, if not at its own address. */
	STRIPE_API_URL: z.url({ protocol: /^https?$/ }).optional(),
	/** Origins of its pages for payment and for customers, separated by spaces: forms may lead there. */
	STRIPE_PAGES: z.string().default('https://checkout.stripe.com https://billing.stripe.com'),
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
