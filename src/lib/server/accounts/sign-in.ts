import { eq } from 'drizzle-orm';
import { InvalidInputError } from '../access/errors';
import { forgive, giveBack, limit } from '../access/limit';
import { database, type Database } from '../db';
import { passwords } from '../db/schema';
import { log } from '../log';
import { normaliseEmail } from './email';
import { findAccountByEmail } from './people';
import type { Person } from './person';
import { hashPassword, isWeakHash, verifyPassword } from './passwords';

/** The password is right, but the address has not been confirmed yet. */
export class UnconfirmedAddressError extends InvalidInputError {
	constructor() {
		super('Please confirm your address first: follow the link in the mail that we sent you.');
		this.name = 'UnconfirmedAddressError';
	}
}

/**
 * Checks an address and a password. Tries are counted per account and source and per source, so guesses from one place
 * never lock the owner out of another.
 * @param source from `sourceOf(address of the client)`
 * @throws InvalidInputError in the same words for an unknown address and a wrong password, UnconfirmedAddressError,
 *   TooManyRequestsError
 */
export async function checkCredentials(
	input: { email: string; password: string },
	source: string,
	db: Database = database()
): Promise<Person> {
	const email = normaliseEmail(input.email);
	const perAccount = `sign-in:${email}:${source}`;
	const perSource = `sign-in-source:${source}`;
	await limit(perSource, 100, 900, db);
	await limit(perAccount, 10, 900, db);
	const account = await findAccountByEmail(db, email);
	const right = await verifyPassword(account?.passwordHash, input.password);
	if (!right || account === null || account.passwordHash === undefined) {
		log.warn({ source, account: account?.id ?? null }, 'sign-in refused');
		throw new InvalidInputError('This address and password do not belong together. Please check both.');
	}
	await giveBack(perSource, db);
	if (!account.confirmed) throw new UnconfirmedAddressError();
	await forgive(perAccount, db);
	if (isWeakHash(account.passwordHash)) {
		const hash = await hashPassword(input.password);
		await db.update(passwords).set({ hash }).where(eq(passwords.userId, account.id));
	}
	log.info({ source, account: account.id }, 'signed in');
	return { id: account.id, name: account.name, email: account.email };
}
