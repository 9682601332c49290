import { and, eq, isNull, sql } from 'drizzle-orm';
import { InvalidInputError } from '../access/errors';
import { limit } from '../access/limit';
import { database, type Database } from '../db';
import { mailTokens, users } from '../db/schema';
import { alreadyRegisteredMail, confirmationMail } from '../mail/templates';
import { sendBeside, sendMail } from '../mail/transport';
import { normaliseEmail } from './email';
import { issueMailToken, lifetimeHours, useMailToken, findMailToken } from './mail-tokens';
import { atLeast } from './pace';
import { findAccountByEmail, findAccountById, storePassword } from './people';
import { refuseNewPassword } from './password-rules';
import { hashPassword, verifyPassword } from './passwords';

const hour = 3600;

/**
 * Starts an account: nothing counts until the address is confirmed. Whether the address is known already shows only in
 * the mail, which goes to its owner. Signing up again before confirming replaces name and password.
 * @param input.returnTo path to go on with once the address is confirmed; checked by `safeReturnTo`
 * @throws InvalidInputError for a poor password, TooManyRequestsError, MailNotSentError
 */
export async function signUp(
	input: { name: string; email: string; password: string; returnTo?: string },
	source: string,
	db: Database = database()
): Promise<void> {
	const email = normaliseEmail(input.email);
	const refusal = refuseNewPassword(input.password, { name: input.name, email });
	if (refusal !== null) throw new InvalidInputError(refusal, { password: refusal });
	await limit(`sign-up-source:${source}`, 30, hour, db);
	await limit(`sign-up:${email}`, 5, hour, db);
	const hash = await hashPassword(input.password);
	const mail = await atLeast(400, () =>
		db.transaction(async (tx) => {
			const [started] = (
				await tx.execute<{ id: string }>(sql`
					insert into ${users} (name, email) values (${input.name}, ${email})
					on conflict (lower(email)) do update set name = excluded.name
					where ${users.emailVerified} is null
					returning id`)
			).rows;
			if (started !== undefined) {
				await storePassword(tx, started.id, hash);
				const token = await issueMailToken(tx, started.id, 'confirm-address');
				return confirmationMail(
					{ name: input.name, email },
					token,
					lifetimeHours['confirm-address'],
					input.returnTo
				);
			}
			const known = await findAccountByEmail(tx, email);
			// Addressed by the name that the owner gave, not by the one just typed by whoever it was.
			return alreadyRegisteredMail({ name: known?.name ?? input.name, email }, input.returnTo);
		})
	);
	await sendMail(mail);
}

/**
 * Sends the confirmation once more. Says nothing about whether anybody waits for one.
 * @throws TooManyRequestsError
 */
export async function resendConfirmation(
	typedEmail: string,
	source: string,
	db: Database = database(),
	returnTo = ''
): Promise<{ sending: Promise<void> }> {
	const email = normaliseEmail(typedEmail);
	await limit(`resend-source:${source}`, 30, hour, db);
	await limit(`resend:${email}`, 3, hour, db);
	return atLeast(400, async () => {
		const account = await findAccountByEmail(db, email);
		if (account === null || account.confirmed) return { sending: Promise.resolve() };
		const token = await issueMailToken(db, account.id, 'confirm-address');
		return {
			sending: sendBeside(confirmationMail(account, token, lifetimeHours['confirm-address'], returnTo))
		};
	});
}

/**
 * The address that a confirmation link would confirm, or null when the link is used or too old. Looking does not use it
 * (mail scanners follow links).
 */
export async function findConfirmation(
	token: string,
	db: Database = database()
): Promise<{ email: string } | null> {
	const userId = await findMailToken(db, token, 'confirm-address');
	const account = userId === null ? null : await findAccountById(db, userId);
	return account === null ? null : { email: account.email };
}

/**
 * Confirms an address. The password shows that whoever reads the mail is who signed up: without it a stranger could
 * start an account in somebody's name and wait for them to follow the link.
 * @returns the confirmed address, for signing in
 * @throws InvalidInputError when the link is used or too old or the password is wrong, TooManyRequestsError
 */
export async function confirmAddress(
	token: string,
	password: string,
	source: string,
	db: Database = database()
): Promise<{ email: string }> {
	await limit(`confirm:${source}`, 30, hour, db);
	const userId = await findMailToken(db, token, 'confirm-address');
	const account = userId === null ? null : await findAccountById(db, userId);
	if (account === null) throw usedOrOld();
	if (!(await verifyPassword(account.passwordHash, password))) {
		const message = 'This is not the password that was chosen at sign-up.';
		throw new InvalidInputError(message, { password: message });
	}
	return db.transaction(async (tx) => {
		if ((await useMailToken(tx, token, 'confirm-address')) === null) throw usedOrOld();
		await tx
			.update(users)
			.set({ emailVerified: sql`now()` })
			.where(and(eq(users.id, account.id), isNull(users.emailVerified)));
		return { email: account.email };
	});
}

function usedOrOld(): InvalidInputError {
	return new InvalidInputError('This link has been used or is too old. Ask for a new one below.');
}

/** Drops accounts that nobody confirmed within a week, and old links; a housekeeping job calls it. */
export async function dropUnconfirmed(db: Database = database()): Promise<void> {
	await db
		.delete(users)
		.where(and(isNull(users.emailVerified), sql`${users.createdAt} < now() - interval '7 days'`));
	await db.delete(mailTokens).where(sql`${mailTokens.expires} < now() - interval '7 days'`);
}
