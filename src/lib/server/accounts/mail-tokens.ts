import { and, eq, gt, isNull, sql } from 'drizzle-orm';
import type { Queryable } from '../db';
import { mailTokens } from '../db/schema';
import { hashToken, newToken } from './tokens';

export type MailPurpose = 'confirm-address' | 'reset-password';

/** Hours for which a link in a mail works. */
export const lifetimeHours: Readonly<Record<MailPurpose, number>> = {
	'confirm-address': 24,
	'reset-password': 1
};

/** Makes a link's token. Earlier links for the same purpose stop working: only the newest mail counts. */
export async function issueMailToken(db: Queryable, userId: string, purpose: MailPurpose): Promise<string> {
	const token = newToken();
	await db.delete(mailTokens).where(and(eq(mailTokens.userId, userId), eq(mailTokens.purpose, purpose)));
	await db.insert(mailTokens).values({
		tokenHash: hashToken(token),
		userId,
		purpose,
		expires: sql`now() + make_interval(hours => ${lifetimeHours[purpose]})`
	});
	return token;
}

function usable(token: string, purpose: MailPurpose) {
	return and(
		eq(mailTokens.tokenHash, hashToken(token)),
		eq(mailTokens.purpose, purpose),
		isNull(mailTokens.usedAt),
		gt(mailTokens.expires, sql`now()`)
	);
}

/** Whose token it is, without using it; null when it is unknown, used or too old. */
export async function findMailToken(
	db: Queryable,
	token: string,
	purpose: MailPurpose
): Promise<string | null> {
	const [row] = await db.select({ userId: mailTokens.userId }).from(mailTokens).where(usable(token, purpose));
	return row?.userId ?? null;
}

/** Uses a token: of any number of parallel uses exactly one gets the person's id, the others null. */
export async function useMailToken(
	db: Queryable,
	token: string,
	purpose: MailPurpose
): Promise<string | null> {
	const [row] = await db
		.update(mailTokens)
		.set({ usedAt: sql`now()` })
		.where(usable(token, purpose))
		.returning({ userId: mailTokens.userId });
	return row?.userId ?? null;
}
