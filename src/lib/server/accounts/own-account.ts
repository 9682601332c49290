import { eq } from 'drizzle-orm';
import { InvalidInputError, NotFoundError } from '../access/errors';
import { limit } from '../access/limit';
import { database, type Database } from '../db';
import { users } from '../db/schema';
import { passwordChangedMail } from '../mail/templates';
import { sendBeside } from '../mail/transport';
import { voidApprovalsNaming } from '../reviews/renamed';
import { findAccountById, storePassword } from './people';
import type { Person } from './person';
import { refuseNewPassword } from './password-rules';
import { hashPassword, verifyPassword } from './passwords';
import { closeAllSessions } from './sessions';

/** Changes a person's own name, which new reports print. */
export async function changeName(person: Person, name: string, db: Database = database()): Promise<void> {
	await db.transaction(async (tx) => {
		await tx.update(users).set({ name }).where(eq(users.id, person.id));
		await voidApprovalsNaming(tx, person.id);
	});
}

/**
 * Changes a person's own password, ends all their other sessions and tells them by mail.
 * @param keepSession id of the session that asks, which stays
 * @throws InvalidInputError by field, TooManyRequestsError
 */
export async function changePassword(
	person: Person,
	input: { current: string; next: string },
	keepSession: string | null,
	db: Database = database()
): Promise<{ sending: Promise<void> }> {
	await limit(`password:${person.id}`, 10, 900, db);
	const account = await findAccountById(db, person.id);
	if (account === null) throw new NotFoundError('account');
	if (!(await verifyPassword(account.passwordHash, input.current))) {
		const message = 'This is not your present password.';
		throw new InvalidInputError(message, { current: message });
	}
	const refusal = refuseNewPassword(input.next, account);
	if (refusal !== null) throw new InvalidInputError(refusal, { next: refusal });
	const hash = await hashPassword(input.next);
	await db.transaction(async (tx) => {
		await storePassword(tx, person.id, hash);
		await closeAllSessions(person.id, keepSession, tx);
	});
	return { sending: sendBeside(passwordChangedMail(account)) };
}
