import { eq } from 'drizzle-orm';
import { limit } from '../../access/limit';
import type { Membership } from '../../access/membership';
import { normaliseEmail } from '../../accounts/email';
import type { Database, Queryable } from '../../db';
import { users } from '../../db/schema';
import type { Mail } from '../../mail/transport';
import { MailNotSentError, sendMail } from '../../mail/transport';

/** What came of an invitation: it stands either way; a mail that was refused can be sent again. */
export interface Sending {
	email: string;
	sent: boolean;
}

const hour = 3600;

/**
 * Nobody's mailbox is flooded from here, whoever they are: counted by inviter, by organisation and by address.
 * @throws TooManyRequestsError
 */
export async function paceInvitations(membership: Membership, email: string, db: Database): Promise<void> {
	await limit(`invite:${membership.userId}`, 40, hour, db);
	await limit(`invite-organisation:${membership.organisationId}`, 120, 24 * hour, db);
	await limit(`invite-address:${normaliseEmail(email)}`, 10, 24 * hour, db);
}

/** Call it after the transaction is committed. */
export async function sendInvitation(email: string, mail: Mail): Promise<Sending> {
	try {
		await sendMail(mail);
		return { email, sent: true };
	} catch (cause) {
		if (!(cause instanceof MailNotSentError)) throw cause;
		return { email, sent: false };
	}
}

/** The name that stands in the mail. */
export async function inviterName(membership: Membership, db: Queryable): Promise<string> {
	const [row] = await db.select({ name: users.name }).from(users).where(eq(users.id, membership.userId));
	return row?.name ?? 'A member';
}

/** What came of it, in words for the page. */
export function toldOf({ email, sent }: Sending): { done?: string; undone?: string } {
	return sent
		? { done: `The invitation is on its way to ${email}.` }
		: {
				undone: `The invitation of ${email} stands, but the mail could not be sent. Send it again in a few minutes, from the list of open invitations.`
			};
}
