import { eq, sql, and } from 'drizzle-orm';
import { recordAudit } from '../../access/audit';
import { ConflictError, ForbiddenError, NotFoundError } from '../../access/errors';
import { limit } from '../../access/limit';
import type { MemberRole } from '../../access/membership';
import { normaliseEmail } from '../../accounts/email';
import { findAccountById } from '../../accounts/people';
import type { Person } from '../../accounts/person';
import { hashToken } from '../../accounts/tokens';
import { seatsOf, type Seats } from '../../billing/seats';
import { database, type Database, type Queryable, type Transaction } from '../../db';
import { dossierGuests, dossiers, invitations, memberships, organisations, users } from '../../db/schema';
import { lockMembers, memberOf } from '../lock';
import { invitationState, type InvitationState } from './state';

export interface Invitation {
	id: string;
	organisationId: string;
	organisationName: string;
	kind: 'member' | 'guest';
	/** In lower case. */
	email: string;
	roles: MemberRole[];
	/** Of a guest. */
	dossier: { id: string; title: string } | null;
	/** Who sent it last; null where that account is gone. */
	inviter: { name: string; email: string } | null;
	state: InvitationState;
	expiresAt: Date;
	acceptedBy: string | null;
}

/** Every seat is taken: the invitation stays open. */
export class NoSeatError extends ConflictError {
	constructor(invitation: Pick<Invitation, 'organisationName' | 'inviter'>) {
		const whom =
			invitation.inviter === null ? 'an owner' : `${invitation.inviter.name} (${invitation.inviter.email})`;
		super(
			`Every seat of ${invitation.organisationName} is taken. Ask ${whom} for a seat; the invitation stays open, and this button works once there is one.`
		);
		this.name = 'NoSeatError';
	}
}

async function find(db: Queryable, token: string): Promise<Invitation> {
	const [row] = await db
		.select({
			id: invitations.id,
			organisationId: invitations.organisationId,
			organisationName: organisations.name,
			kind: invitations.kind,
			email: invitations.email,
			roles: invitations.roles,
			dossierId: dossiers.id,
			dossierTitle: dossiers.title,
			inviterName: users.name,
			inviterEmail: users.email,
			state: invitationState,
			expiresAt: invitations.expiresAt,
			acceptedBy: invitations.acceptedBy
		})
		.from(invitations)
		.innerJoin(organisations, eq(organisations.id, invitations.organisationId))
		.leftJoin(dossiers, eq(dossiers.id, invitations.dossierId))
		.leftJoin(users, eq(users.id, invitations.invitedBy))
		.where(eq(invitations.tokenHash, hashToken(token)));
	if (row === undefined) throw new NotFoundError('invitation');
	const { dossierId, dossierTitle, inviterName, inviterEmail, ...invitation } = row;
	return {
		...invitation,
		email: normaliseEmail(row.email),
		dossier: dossierId === null ? null : { id: dossierId, title: dossierTitle ?? '' },
		inviter: inviterName === null ? null : { name: inviterName, email: inviterEmail ?? '' }
	};
}

/**
 * What the link of an invitation leads to, whoever holds it. Looking does not use it (mail scanners follow links).
 * @throws NotFoundError for a link that never was, or that a newer one has replaced
 */
export async function openInvitation(token: string, db: Database = database()): Promise<Invitation> {
	return find(db, token);
}

/** Whether a person's account has the address that an invitation went to. */
export function isAddressee(invitation: Pick<Invitation, 'email'>, person: Pick<Person, 'email'>): boolean {
	return normaliseEmail(person.email) === invitation.email;
}

/** An address that its owner knows again and a stranger cannot write to: "r…@company.example". */
export function maskedAddress(email: string): string {
	const at = email.lastIndexOf('@');
	return `${[...email][0] ?? ''}…${email.slice(at)}`;
}

/** Why an invitation that is not open cannot be accepted, and what to do. */
export const whyNot: Readonly<Record<Exclude<InvitationState, 'open'>, string>> = {
	expired: 'This invitation is too old. Ask for it to be sent again.',
	revoked: 'This invitation was taken back. Ask who sent it whether that was meant.',
	accepted: 'This invitation has been used already.'
};

async function takeSeat(
	tx: Transaction,
	invitation: Invitation,
	person: Person,
	seats: (organisationId: string, db: Queryable) => Promise<Seats>
): Promise<void> {
	const { organisationId, roles } = invitation;
	if ((await tx.$count(memberships, memberOf(organisationId, person.id))) > 0) return;
	// Counted under the lock: whoever came in before is seen here.
	const { taken, limit: paid } = await seats(organisationId, tx);
	if (taken >= paid) throw new NoSeatError(invitation);
	await tx.insert(memberships).values({ organisationId, userId: person.id, roles });
	// A member reads every dossier: what they were let in to as a guest is part of that now.
	await tx
		.delete(dossierGuests)
		.where(and(eq(dossierGuests.organisationId, organisationId), eq(dossierGuests.userId, person.id)));
	await recordAudit(tx, { organisationId, userId: person.id }, 'members.join', person.id, { roles });
}

async function letIn(tx: Transaction, invitation: Invitation, person: Person): Promise<void> {
	const { organisationId, dossier } = invitation;
	if (dossier === null) throw new NotFoundError('dossier');
	if ((await tx.$count(memberships, memberOf(organisationId, person.id))) > 0) return;
	await tx
		.insert(dossierGuests)
		.values({ dossierId: dossier.id, userId: person.id, organisationId })
		.onConflictDoNothing();
	await recordAudit(tx, { organisationId, userId: person.id }, 'guests.join', person.id, {
		dossier: dossier.id
	});
}

/** Whether this person used it and still has what it gave: they may have been taken out since. */
async function isIn(tx: Transaction, invitation: Invitation, person: Person): Promise<boolean> {
	const { organisationId, dossier, acceptedBy } = invitation;
	if (acceptedBy !== person.id) return false;
	if ((await tx.$count(memberships, memberOf(organisationId, person.id))) > 0) return true;
	if (dossier === null) return false;
	const guest = and(eq(dossierGuests.dossierId, dossier.id), eq(dossierGuests.userId, person.id));
	return (await tx.$count(dossierGuests, guest)) > 0;
}

/**
 * Accepts an invitation for a signed-in person. It is used once; a second click of the same person finds it done.
 * @param seats for tests
 * @returns what they were let in to
 * @throws NotFoundError for an unknown link, ForbiddenError where it went to another address, ConflictError where it
 * is no longer open, NoSeatError where every seat is taken, TooManyRequestsError
 */
export async function acceptInvitation(
	person: Person,
	token: string,
	db: Database = database(),
	seats: (organisationId: string, db: Queryable) => Promise<Seats> = seatsOf
): Promise<Pick<Invitation, 'organisationId' | 'organisationName' | 'kind' | 'dossier'>> {
	await limit(`accept-invitation:${person.id}`, 60, 3600, db);
	return db.transaction(async (tx) => {
		const { organisationId } = await find(tx, token);
		await lockMembers(tx, organisationId);
		// Read again under the lock: it may have been used, taken back or sent anew meanwhile.
		await tx
			.select({ id: invitations.id })
			.from(invitations)
			.where(eq(invitations.tokenHash, hashToken(token)))
			.for('update');
		const invitation = await find(tx, token);
		const account = await findAccountById(tx, person.id);
		if (account?.confirmed !== true || !isAddressee(invitation, account)) {
			throw new ForbiddenError('This invitation went to another address than that of your account.');
		}
		const { organisationName, kind, dossier, state } = invitation;
		const result = { organisationId, organisationName, kind, dossier };
		if (state === 'accepted' && (await isIn(tx, invitation, person))) return result;
		if (state !== 'open') throw new ConflictError(whyNot[state]);
		if (kind === 'member') await takeSeat(tx, invitation, person, seats);
		else await letIn(tx, invitation, person);
		await tx
			.update(invitations)
			.set({ acceptedAt: sql`now()`, acceptedBy: person.id })
			.where(eq(invitations.id, invitation.id));
		await recordAudit(tx, { organisationId, userId: person.id }, 'invitations.accept', invitation.id);
		return result;
	});
}
