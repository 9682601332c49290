import { z } from 'zod';

/* Forms about a person's own account. Rules for new passwords beyond their length are checked on the server. */

/** One line of text that a person typed: trimmed, composed, without control characters. */
export function line(what: string, longest: number) {
	return z
		.string(`Enter ${what}.`)
		.transform((text) => text.normalize('NFC').replace(/\s+/gu, ' ').trim())
		.pipe(
			z
				.string()
				.min(1, `Enter ${what}.`)
				.max(longest, `Use at most ${longest} characters for ${what}.`)
				.refine((text) => !/[\p{Cc}\u202a-\u202e\u2066-\u2069]/u.test(text), {
					error: `Leave control characters out of ${what}.`
				})
		);
}

const address = z
	.string('Enter your e-mail address.')
	.transform((text) => text.trim().normalize('NFC'))
	.pipe(
		z
			.string()
			.min(1, 'Enter your e-mail address.')
			.max(254, 'This e-mail address is too long.')
			.pipe(z.email('Enter an e-mail address such as name@company.example.'))
	);

const password = z
	.string('Enter your password.')
	.min(1, 'Enter your password.')
	.max(1000, 'This is longer than any password here.');

const newPassword = z
	.string('Choose a password.')
	.min(1, 'Choose a password.')
	.max(1000, 'Use at most 256 characters.');

export const signInSchema = z.object({ email: address, password });
export const signUpSchema = z.object({ name: line('your name', 100), email: address, password: newPassword });
export const addressSchema = z.object({ email: address });
export const confirmSchema = z.object({ password });
export const resetSchema = z.object({ password: newPassword });
export const nameSchema = z.object({ name: line('your name', 100) });
export const changePasswordSchema = z.object({
	current: z.string('Enter your present password.').min(1, 'Enter your present password.').max(1000),
	next: newPassword
});
export const sessionSchema = z.object({ session: z.string().regex(/^[0-9a-f]{64}$/) });
