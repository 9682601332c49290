import { eq, sql } from 'drizzle-orm';
import { InvalidInputError } from '../access/errors';
import { limit } from '../access/limit';
import { database, type Database } from '../db';
import { users } from '../db/schema';
import { passwordChangedMail, resetMail } from '../mail/templates';
import { sendBeside } from '../mail/transport';
import { normaliseEmail } from './email';
import { findMailToken, issueMailToken, lifetimeHours, useMailToken } from './mail-tokens';
import { atLeast } from './pace';
import { findAccountByEmail, findAccountById, storePassword } from './people';
import { refuseNewPassword } from './password-rules';
import { hashPassword } from './passwords';
import { closeAllSessions } from './sessions';

const hour = 3600;

/**
 * Sends a link for a new password, if the address has an account. The mail leaves while the answer is already under
 * way, so that the time taken does not tell.
 * @returns `sending`, which settles when the mail has left; a caller that waits for it before answering gives it away
 * @throws TooManyRequestsError
 */
export async function requestReset(
	typedEmail: string,
	source: string,
	db: Database = database()
): Promise<{ sending: Promise<void> }> {
	const email = normaliseEmail(typedEmail);
	await limit(`reset-source:${source}`, 30, hour, db);
	await limit(`reset:${email}`, 3, hour, db);
	return atLeast(400, async () => {
		const account = await findAccountByEmail(db, email);
		if (account === null) return { sending: Promise.resolve() };
		const token = await issueMailToken(db, account.id, 'reset-password');
		return { sending: sendBeside(resetMail(account, token, lifetimeHours['reset-password'])) };
	});
}

/** Whose password a reset link would change, or null when it is used or too old; looking does not use it. */
export async function findReset(token: string, db: Database = database()): Promise<{ email: string } | null> {
	const userId = await findMailToken(db, token, 'reset-password');
	const account = userId === null ? null : await findAccountById(db, userId);
	return account === null ? null : { email: account.email };
}

/**
 * Sets a new password by a mailed link, ends every session, and tells the owner. Who holds the link reads the mailbox,
 * so the address counts as confirmed from then on.
 * @throws InvalidInputError when the link is used or too old or the password is poor, TooManyRequestsError
 */
export async function resetPassword(
	token: string,
	password: string,
	source: string,
	db: Database = database()
): Promise<{ sending: Promise<void> }> {
	await limit(`reset-use:${source}`, 30, hour, db);
	const userId = await findMailToken(db, token, 'reset-password');
	const account = userId === null ? null : await findAccountById(db, userId);
	if (account === null) throw usedOrOld();
	const refusal = refuseNewPassword(password, account);
	if (refusal !== null) throw new InvalidInputError(refusal, { password: refusal });
	const hash = await hashPassword(password);
	await db.transaction(async (tx) => {
		if ((await useMailToken(tx, token, 'reset-password')) === null) throw usedOrOld();
		await storePassword(tx, account.id, hash);
		await closeAllSessions(account.id, null, tx);
		await tx
			.update(users)
			.set({ emailVerified: sql`coalesce(${users.emailVerified}, now())` })
			.where(eq(users.id, account.id));
	});
	return { sending: sendBeside(passwordChangedMail(account)) };
}

function usedOrOld(): InvalidInputError {
	return new InvalidInputError('This link has been used or is too old. Ask for a new one.');
}
