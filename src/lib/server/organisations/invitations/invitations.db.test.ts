import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { emptyDossier } from '$lib/schemas/dossier';
import {
	ConflictError,
	ForbiddenError,
	InvalidInputError,
	NotFoundError,
	TooManyRequestsError
} from '../../access/errors';
import type { Membership, MemberRole } from '../../access/membership';
import type { Person } from '../../accounts/person';
import { hashToken } from '../../accounts/tokens';
import type { Database } from '../../db';
import { auditEvents, dossierGuests, invitations, memberships, rateWindows, users } from '../../db/schema';
import { createDossier } from '../../dossiers/create';
import { deleteDossier } from '../../dossiers/delete';
import { openDossier } from '../../dossiers/show';
import { closeMail } from '../../mail/transport';
import { testDatabase } from '../../testing/db';
import { setTestEnvironment } from '../../testing/environment';
import { openMailbox, type Mailbox } from '../../testing/mailbox';
import { testOrganisation } from '../../testing/people';
import { giveSeats } from '../../testing/seats';
import { endGuestAccess, leaveDossier, peopleOfDossier } from '../guests';
import { changeRoles, countSeats, leaveOrganisation, listMembers, removeMember } from '../members';
import { membershipIn, membershipsOf } from '../memberships';
import { enrolForSetUp } from '../set-up';
import { acceptInvitation, maskedAddress, NoSeatError, openInvitation } from './accept';
import { inviteGuest, inviteMember } from './invite';
import { listOpenInvitations } from './open';
import { dropOldInvitations, resendInvitation, revokeInvitation } from './withdraw';

let db: Database;
let drop: () => Promise<void>;
let mailbox: Mailbox;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
	mailbox = await openMailbox();
	setTestEnvironment({ SMTP_URL: mailbox.url, ORIGIN: 'https://noonmark.example' });
});
afterAll(async () => {
	closeMail();
	await mailbox.close();
	await drop();
});

let people = 0;

/** A confirmed account without a password: nobody signs in here, and a password takes long to hash. */
async function aPerson(database: Database, name = 'Rhea Aldous'): Promise<Person> {
	const email = `person${++people}.${Date.now()}@test.example`;
	const [row] = await database
		.insert(users)
		.values({ name, email, emailVerified: sql`now()` })
		.returning({ id: users.id });
	if (row === undefined) throw new Error('The person was not stored.');
	return { id: row.id, name, email };
}

interface House {
	owner: Person;
	membership: Membership;
}

/** An organisation with a plan of ten seats. */
async function house(seats = 10): Promise<House> {
	const owner = await aPerson(db, 'Ada Owner');
	const membership = await testOrganisation(db, owner);
	if (seats > 1) await giveSeats(db, membership.organisationId, seats);
	return { owner, membership };
}

const newDossier = (membership: Membership, title = 'Roofs') =>
	createDossier(membership, { ...emptyDossier, title }, db);

function mailsTo(email: string) {
	return mailbox.mails.filter((mail) => JSON.stringify(mail.to).includes(email.toLowerCase()));
}

/** The token in the newest mail to an address. */
function mailedToken(email: string): string {
	const text = mailsTo(email).at(-1)?.text ?? '';
	const found = /https:\/\/noonmark\.example\/invitation\/([\w-]{43})\s/.exec(text);
	if (found?.[1] === undefined) throw new Error(`No invitation was sent to ${email}.`);
	return found[1];
}

async function invited(
	{ membership }: House,
	person: Person,
	roles: MemberRole[] = ['author']
): Promise<string> {
	await inviteMember(membership, { email: person.email, roles }, db);
	return mailedToken(person.email);
}

async function guestToken({ membership }: House, dossier: string, person: Person): Promise<string> {
	await inviteGuest(membership, dossier, { email: person.email }, db);
	return mailedToken(person.email);
}

const openOf = ({ membership }: House) => listOpenInvitations(membership, { kind: 'member' }, db);
const expire = (token: string) =>
	db
		.update(invitations)
		.set({ expiresAt: sql`now() - interval '1 second'` })
		.where(eq(invitations.tokenHash, hashToken(token)));
const actionsIn = async (organisationId: string) =>
	(await db.select().from(auditEvents).where(eq(auditEvents.organisationId, organisationId))).map(
		({ action }) => action
	);

describe('an invitation of a member', () => {
	it('goes by mail, in text and HTML, and is accepted once by who has the address', async () => {
		const home = await house();
		const person = await aPerson(db, 'Runa Aldous');
		const sending = await inviteMember(
			home.membership,
			{ email: person.email.toUpperCase(), roles: ['author', 'reviewer'] },
			db
		);
		expect(sending).toEqual({ email: person.email, sent: true });
		const [mail] = mailsTo(person.email);
		expect(mail?.text).toContain('Ada Owner invites you to work with “Tallis Brook Consulting”');
		expect(mail?.text).toContain('author and reviewer');
		const token = mailedToken(person.email);
		expect(mail?.html).toContain(`href="https://noonmark.example/invitation/${token}"`);
		const stored = JSON.stringify(await db.select().from(invitations));
		expect(stored).not.toContain(token);

		expect(await openInvitation(token, db)).toMatchObject({
			state: 'open',
			kind: 'member',
			organisationName: 'Tallis Brook Consulting',
			roles: ['author', 'reviewer'],
			inviter: { name: 'Ada Owner' }
		});
		expect(await membershipIn(person, home.membership.organisationId, db)).toBeNull();
		await acceptInvitation(person, token, db);
		expect(await membershipIn(person, home.membership.organisationId, db)).toMatchObject({
			roles: ['author', 'reviewer'],
			onlyDossiers: null
		});
		expect(await openOf(home)).toEqual([]);
		expect((await openInvitation(token, db)).state).toBe('accepted');
		expect(await actionsIn(home.membership.organisationId)).toEqual([
			'invitations.send',
			'members.join',
			'invitations.accept'
		]);
		// Taken out since, the same link is no way back.
		await removeMember(home.membership, person.id, db);
		await expect(acceptInvitation(person, token, db)).rejects.toThrow(ConflictError);
		expect(await membershipsOf(person, db)).toEqual([]);
	});

	it('clicked twice at once happens once', async () => {
		const home = await house();
		const person = await aPerson(db);
		const token = await invited(home, person);
		const clicks = await Promise.allSettled(
			Array.from({ length: 6 }, () => acceptInvitation(person, token, db))
		);
		expect(clicks.every((one) => one.status === 'fulfilled')).toBe(true);
		const actions = await actionsIn(home.membership.organisationId);
		expect(actions.filter((action) => action === 'members.join')).toHaveLength(1);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 2, limit: 10 });
	});

	it('is of no use to another account, however it is written', async () => {
		const home = await house();
		const [person, other] = [await aPerson(db), await aPerson(db)];
		const token = await invited(home, person);
		await expect(acceptInvitation(other, token, db)).rejects.toThrow(ForbiddenError);
		// What a session claims does not count; the account does.
		await expect(acceptInvitation({ ...other, email: person.email }, token, db)).rejects.toThrow(
			ForbiddenError
		);
		await db.update(users).set({ emailVerified: null }).where(eq(users.id, person.id));
		await expect(acceptInvitation(person, token, db)).rejects.toThrow(ForbiddenError);
		await db
			.update(users)
			.set({ emailVerified: sql`now()` })
			.where(eq(users.id, person.id));
		expect((await openInvitation(token, db)).state).toBe('open');
		await acceptInvitation(person, token, db);
		await expect(acceptInvitation(other, token, db)).rejects.toThrow(ForbiddenError);
		expect(await listMembers(home.membership, db)).toHaveLength(2);
	});

	it('expires, and is sent again with another link', async () => {
		const home = await house();
		const person = await aPerson(db);
		const first = await invited(home, person);
		const [row] = await openOf(home);
		const days = ((row?.expiresAt.getTime() ?? 0) - Date.now()) / 86_400_000;
		expect(days).toBeGreaterThan(13.9);
		expect(days).toBeLessThan(14.1);
		await expire(first);
		expect((await openInvitation(first, db)).state).toBe('expired');
		await expect(acceptInvitation(person, first, db)).rejects.toThrow(/too old/);
		expect(await openOf(home)).toMatchObject([{ state: 'expired', email: person.email }]);

		await resendInvitation(home.membership, row?.id ?? '', db);
		const second = mailedToken(person.email);
		expect(second).not.toBe(first);
		await expect(openInvitation(first, db)).rejects.toThrow(NotFoundError);
		await expect(acceptInvitation(person, first, db)).rejects.toThrow(NotFoundError);
		expect(await openOf(home)).toMatchObject([{ state: 'open' }]);
		await acceptInvitation(person, second, db);
		await expect(resendInvitation(home.membership, row?.id ?? '', db)).rejects.toThrow(NotFoundError);
	});

	it('is taken back, also while it is being accepted', async () => {
		const home = await house();
		const person = await aPerson(db);
		const token = await invited(home, person);
		const [row] = await openOf(home);
		expect(await revokeInvitation(home.membership, row?.id ?? '', db)).toEqual({ email: person.email });
		expect((await openInvitation(token, db)).state).toBe('revoked');
		await expect(acceptInvitation(person, token, db)).rejects.toThrow(/taken back/);
		await expect(revokeInvitation(home.membership, row?.id ?? '', db)).rejects.toThrow(NotFoundError);
		expect(await membershipsOf(person, db)).toEqual([]);

		const again = await invited(home, person);
		const [open] = await openOf(home);
		const [revoked, accepted] = await Promise.allSettled([
			revokeInvitation(home.membership, open?.id ?? '', db),
			acceptInvitation(person, again, db)
		]);
		// Whichever came first, the other was refused.
		expect([revoked.status, accepted.status].filter((status) => status === 'fulfilled')).toHaveLength(1);
		expect((await membershipsOf(person, db)).length).toBe(accepted.status === 'fulfilled' ? 1 : 0);
	});

	it('sent twice is one, with the roles of the second', async () => {
		const home = await house();
		const person = await aPerson(db);
		const first = await invited(home, person, ['owner']);
		const second = await invited(home, person, ['reader']);
		expect(await openOf(home)).toMatchObject([{ roles: ['reader'] }]);
		await expect(openInvitation(first, db)).rejects.toThrow(NotFoundError);
		await acceptInvitation(person, second, db);
		expect(await membershipIn(person, home.membership.organisationId, db)).toMatchObject({
			roles: ['reader']
		});
	});

	it('sent by two clicks at once is one too', async () => {
		const home = await house();
		const person = await aPerson(db);
		await Promise.all([invited(home, person), invited(home, person), invited(home, person)]);
		expect(await openOf(home)).toHaveLength(1);
	});

	it('is not sent to a member, and tells nothing of accounts elsewhere', async () => {
		const home = await house();
		const own = await inviteMember(home.membership, { email: home.owner.email, roles: ['reader'] }, db).catch(
			(cause: unknown) => cause
		);
		expect(own).toBeInstanceOf(InvalidInputError);
		if (own instanceof InvalidInputError) expect(own.fields.email).toContain('is a member already');
		const known = await aPerson(db);
		const unknown = `nobody.${Date.now()}@test.example`;
		expect(await inviteMember(home.membership, { email: known.email, roles: ['reader'] }, db)).toEqual({
			email: known.email,
			sent: true
		});
		expect(await inviteMember(home.membership, { email: unknown, roles: ['reader'] }, db)).toEqual({
			email: unknown,
			sent: true
		});
	});

	it('stands although the mail was refused, and goes out when sent again', async () => {
		const home = await house();
		const person = await aPerson(db);
		mailbox.refuse(2);
		expect(await inviteMember(home.membership, { email: person.email, roles: ['author'] }, db)).toEqual({
			email: person.email,
			sent: false
		});
		expect(mailsTo(person.email)).toHaveLength(0);
		const [row] = await openOf(home);
		expect(row).toMatchObject({ state: 'open', email: person.email });
		expect(await resendInvitation(home.membership, row?.id ?? '', db)).toMatchObject({ sent: true });
		await acceptInvitation(person, mailedToken(person.email), db);
	});

	it.each(['author', 'reviewer', 'reader', 'billing'] as const)('is not sent by a %s', async (role) => {
		const home = await house();
		const colleague = await aPerson(db);
		await enrolForSetUp(home.membership, { email: colleague.email, roles: [role] }, db);
		const own = await membershipIn(colleague, home.membership.organisationId, db);
		const refusal = role === 'billing' ? NotFoundError : ForbiddenError;
		const email = `x.${role}@test.example`;
		await expect(inviteMember(own, { email, roles: ['owner'] }, db)).rejects.toThrow(refusal);
		await invited(home, await aPerson(db));
		const [row] = await openOf(home);
		await expect(revokeInvitation(own, row?.id ?? '', db)).rejects.toThrow(refusal);
		await expect(resendInvitation(own, row?.id ?? '', db)).rejects.toThrow(refusal);
		expect(await listOpenInvitations(own, { kind: 'member' }, db)).toEqual([]);
		expect(await openOf(home)).toHaveLength(1);
	});

	it('of one organisation is out of the reach of another’s owner', async () => {
		const [home, foreign] = [await house(), await house()];
		await invited(home, await aPerson(db));
		const [row] = await openOf(home);
		await expect(revokeInvitation(foreign.membership, row?.id ?? '', db)).rejects.toThrow(NotFoundError);
		await expect(resendInvitation(foreign.membership, row?.id ?? '', db)).rejects.toThrow(NotFoundError);
		expect(await openOf(foreign)).toEqual([]);
	});

	it('falls with the one who sent it: taken out, demoted or gone', async () => {
		for (const fall of [
			(home: House, id: string) => removeMember(home.membership, id, db),
			(home: House, id: string) => changeRoles(home.membership, id, ['reader'], db),
			(home: House, id: string, second: Person) =>
				leaveOrganisation(second, home.membership.organisationId, db)
		]) {
			const home = await house();
			const second = await aPerson(db, 'Second Owner');
			await enrolForSetUp(home.membership, { email: second.email, roles: ['owner', 'author'] }, db);
			const own = await membershipIn(second, home.membership.organisationId, db);
			if (own === null) throw new Error('not enrolled');
			const [ally, guest] = [await aPerson(db), await aPerson(db)];
			const token = await invited({ owner: second, membership: own }, ally, ['owner']);
			const dossier = await newDossier(home.membership);
			const guests = await guestToken({ owner: second, membership: own }, dossier, guest);
			const kept = await invited(home, await aPerson(db));
			await fall(home, second.id, second);
			await expect(acceptInvitation(ally, token, db)).rejects.toThrow(/taken back/);
			await expect(acceptInvitation(guest, guests, db)).rejects.toThrow(/taken back/);
			expect((await openInvitation(kept, db)).state).toBe('open');
		}
	});

	it('is unknown where nobody sent it', async () => {
		await expect(openInvitation('x'.repeat(43), db)).rejects.toThrow(NotFoundError);
		await expect(acceptInvitation(await aPerson(db), '', db)).rejects.toThrow(NotFoundError);
	});

	it('is forgotten ninety days after its end, and not before', async () => {
		const home = await house();
		const ended = [await aPerson(db), await aPerson(db), await aPerson(db)];
		const tokens: string[] = [];
		for (const person of ended) tokens.push(await invited(home, person));
		const daysAgo = (days: number) => sql`now() - make_interval(days => ${days})`;
		const age = (token: string, days: number, how: 'expiresAt' | 'revokedAt') =>
			db
				.update(invitations)
				.set({ [how]: daysAgo(days) })
				.where(eq(invitations.tokenHash, hashToken(token)));
		await age(tokens[0] ?? '', 91, 'expiresAt');
		await age(tokens[1] ?? '', 91, 'revokedAt');
		await age(tokens[2] ?? '', 89, 'expiresAt');
		await dropOldInvitations(db);
		await expect(openInvitation(tokens[0] ?? '', db)).rejects.toThrow(NotFoundError);
		await expect(openInvitation(tokens[1] ?? '', db)).rejects.toThrow(NotFoundError);
		expect((await openInvitation(tokens[2] ?? '', db)).state).toBe('expired');
	});

	it('is paced: by inviter, and by address whoever sends', async () => {
		await db.delete(rateWindows);
		const home = await house();
		const outcomes: unknown[] = [];
		for (let i = 0; i < 42; i++) {
			outcomes.push(
				await inviteMember(home.membership, { email: `p${i}@paced.example`, roles: ['reader'] }, db).catch(
					(cause: unknown) => cause
				)
			);
		}
		expect(outcomes.filter((one) => one instanceof TooManyRequestsError)).toHaveLength(2);
		for (let i = 0; i < 10; i++)
			await invited(await house(), { id: '', name: '', email: 'one@paced.example' });
		const eleventh = await house();
		await expect(
			inviteMember(eleventh.membership, { email: 'One@paced.example', roles: ['reader'] }, db)
		).rejects.toThrow(TooManyRequestsError);
		expect(mailsTo('one@paced.example')).toHaveLength(10);
		await db.delete(rateWindows);
	});
});

describe('seats', () => {
	it('are taken at acceptance, and none is given beyond those that are paid for: 20 at once on 5', async () => {
		const home = await house(5);
		const people = await Promise.all(Array.from({ length: 20 }, (_, i) => aPerson(db, `Racer ${i}`)));
		const tokens: string[] = [];
		for (const person of people) tokens.push(await invited(home, person));
		const outcomes = await Promise.allSettled(
			people.map((person, i) => acceptInvitation(person, tokens[i] ?? '', db))
		);
		const refusals = outcomes.flatMap((one) => (one.status === 'rejected' ? [one.reason as unknown] : []));
		expect(outcomes.filter((one) => one.status === 'fulfilled')).toHaveLength(4);
		expect(refusals).toHaveLength(16);
		for (const refusal of refusals) expect(refusal).toBeInstanceOf(NoSeatError);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 5, limit: 5 });
		// Those who found no seat can still come in once there is one.
		expect(await openOf(home)).toHaveLength(16);
		await giveSeats(db, home.membership.organisationId, 20);
		const late = outcomes.findIndex((one) => one.status === 'rejected');
		const person = people[late];
		if (person === undefined) throw new Error('Nobody was refused.');
		await acceptInvitation(person, tokens[late] ?? '', db);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 6, limit: 20 });
	});

	it('are one without a plan, and the refusal says whom to ask', async () => {
		const home = await house(1);
		const person = await aPerson(db);
		const token = await invited(home, person);
		await expect(acceptInvitation(person, token, db)).rejects.toThrow(
			new RegExp(`Ask Ada Owner \\(${home.owner.email}\\) for a seat; the invitation stays open`)
		);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 1, limit: 1 });
	});

	it('become fewer without putting anybody out, and nobody comes in', async () => {
		const home = await house(4);
		const [a, b, c] = [await aPerson(db), await aPerson(db), await aPerson(db)];
		await acceptInvitation(a, await invited(home, a), db);
		await acceptInvitation(b, await invited(home, b), db);
		await giveSeats(db, home.membership.organisationId, 2);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 3, limit: 2 });
		const token = await invited(home, c);
		await expect(acceptInvitation(c, token, db)).rejects.toThrow(NoSeatError);
		await removeMember(home.membership, a.id, db);
		await expect(acceptInvitation(c, token, db)).rejects.toThrow(NoSeatError);
		await leaveOrganisation(b, home.membership.organisationId, db);
		await acceptInvitation(c, token, db);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 2, limit: 2 });
	});

	it('are none of a guest’s', async () => {
		const home = await house(1);
		const guest = await aPerson(db);
		const dossier = await newDossier(home.membership);
		await acceptInvitation(guest, await guestToken(home, dossier, guest), db);
		expect(await countSeats(home.membership, db)).toEqual({ taken: 1, limit: 1 });
	});
});

describe('a guest', () => {
	it('is let in to one dossier, as long as it lasts', async () => {
		const home = await house();
		const guest = await aPerson(db, 'Gil Guest');
		const [dossier, other] = [await newDossier(home.membership), await newDossier(home.membership, 'Yards')];
		const token = await guestToken(home, dossier, guest);
		expect(mailsTo(guest.email).at(-1)?.text).toContain(
			'asks you to review one dossier in Noonmark, “Roofs”'
		);
		expect(await openInvitation(token, db)).toMatchObject({ kind: 'guest', dossier: { title: 'Roofs' } });
		await acceptInvitation(guest, token, db);
		const own = await membershipIn(guest, home.membership.organisationId, db);
		expect(own).toMatchObject({ roles: ['guest'], onlyDossiers: [dossier] });
		expect((await openDossier(own, dossier, db)).id).toBe(dossier);
		await expect(openDossier(own, other, db)).rejects.toThrow(NotFoundError);
		await expect(listMembers(own, db)).rejects.toThrow(NotFoundError);

		// What each sees of the people.
		expect(await peopleOfDossier(own, dossier, db)).toMatchObject({
			members: null,
			guests: [{ name: 'Gil Guest' }],
			invitations: []
		});
		const seen = await peopleOfDossier(home.membership, dossier, db);
		expect(seen.members?.map(({ name }) => name)).toEqual(['Ada Owner']);
		expect(seen.guests).toMatchObject([{ userId: guest.id, email: guest.email }]);
		await expect(peopleOfDossier(own, other, db)).rejects.toThrow(NotFoundError);
		await expect(inviteGuest(own, dossier, { email: 'friend@test.example' }, db)).rejects.toThrow(
			ForbiddenError
		);
		await expect(endGuestAccess(own, dossier, guest.id, db)).rejects.toThrow(ForbiddenError);

		await expect(inviteGuest(home.membership, dossier, { email: guest.email }, db)).rejects.toThrow(
			InvalidInputError
		);
		await endGuestAccess(home.membership, dossier, guest.id, db);
		expect(await membershipIn(guest, home.membership.organisationId, db)).toBeNull();
		await expect(acceptInvitation(guest, token, db)).rejects.toThrow(ConflictError);
		await expect(endGuestAccess(home.membership, dossier, guest.id, db)).rejects.toThrow(NotFoundError);
	});

	it('of two dossiers sees another guest of neither, and leaves one of them', async () => {
		const home = await house();
		const [guest, second] = [await aPerson(db), await aPerson(db)];
		const [one, two] = [await newDossier(home.membership), await newDossier(home.membership)];
		for (const dossier of [one, two]) {
			await acceptInvitation(guest, await guestToken(home, dossier, guest), db);
			await acceptInvitation(second, await guestToken(home, dossier, second), db);
		}
		const own = await membershipIn(guest, home.membership.organisationId, db);
		expect([...(own?.onlyDossiers ?? [])].sort()).toEqual([one, two].sort());
		expect((await peopleOfDossier(own, one, db)).guests.map(({ userId }) => userId)).toEqual([guest.id]);
		await leaveDossier(guest, own, one, db);
		expect(await membershipIn(guest, home.membership.organisationId, db)).toMatchObject({
			onlyDossiers: [two]
		});
		await expect(leaveDossier(guest, own, one, db)).rejects.toThrow(NotFoundError);
		expect((await peopleOfDossier(home.membership, one, db)).guests.map(({ userId }) => userId)).toEqual([
			second.id
		]);
	});

	it('is not let in to a dossier that was deleted meanwhile', async () => {
		const home = await house();
		const guest = await aPerson(db);
		const dossier = await newDossier(home.membership);
		const token = await guestToken(home, dossier, guest);
		await deleteDossier(home.membership, dossier, db);
		expect((await openInvitation(token, db)).state).toBe('revoked');
		await expect(acceptInvitation(guest, token, db)).rejects.toThrow(ConflictError);
		expect(await membershipsOf(guest, db)).toEqual([]);
	});

	it('who becomes a member is no guest beside it, and none afterwards', async () => {
		const home = await house();
		const person = await aPerson(db);
		const dossier = await newDossier(home.membership);
		await acceptInvitation(person, await guestToken(home, dossier, person), db);
		await acceptInvitation(person, await invited(home, person, ['reader']), db);
		expect(await membershipsOf(person, db)).toMatchObject([{ roles: ['reader'], onlyDossiers: null }]);
		await expect(inviteGuest(home.membership, dossier, { email: person.email }, db)).rejects.toThrow(
			InvalidInputError
		);
		await removeMember(home.membership, person.id, db);
		expect(await membershipsOf(person, db)).toEqual([]);
		expect(await db.select().from(dossierGuests).where(eq(dossierGuests.userId, person.id))).toEqual([]);
	});

	it('is invited by authors, not by readers, and to no dossier of another organisation', async () => {
		const [home, foreign] = [await house(), await house()];
		const dossier = await newDossier(home.membership);
		const [author, reader] = [await aPerson(db), await aPerson(db)];
		await enrolForSetUp(home.membership, { email: author.email, roles: ['author'] }, db);
		await enrolForSetUp(home.membership, { email: reader.email, roles: ['reader'] }, db);
		const [asAuthor, asReader] = [
			await membershipIn(author, home.membership.organisationId, db),
			await membershipIn(reader, home.membership.organisationId, db)
		];
		const email = 'guest.of.authors@test.example';
		expect(await inviteGuest(asAuthor, dossier, { email }, db)).toMatchObject({ sent: true });
		await expect(inviteGuest(asReader, dossier, { email }, db)).rejects.toThrow(ForbiddenError);
		await expect(inviteGuest(foreign.membership, dossier, { email }, db)).rejects.toThrow(NotFoundError);
		const open = await peopleOfDossier(asAuthor, dossier, db);
		expect(open.invitations).toMatchObject([{ email, state: 'open' }]);
		expect((await peopleOfDossier(asReader, dossier, db)).invitations).toEqual([]);
		// An author manages guests' invitations, and no members'.
		await invited(home, await aPerson(db));
		const [members] = await openOf(home);
		await expect(revokeInvitation(asAuthor, members?.id ?? '', db)).rejects.toThrow(ForbiddenError);
		await revokeInvitation(asAuthor, open.invitations[0]?.id ?? '', db);
		expect((await peopleOfDossier(asAuthor, dossier, db)).invitations).toEqual([]);
	});
});

describe('roles', () => {
	it('given by an invitation are those of the next request, and of each change after it', async () => {
		const home = await house();
		const person = await aPerson(db);
		await acceptInvitation(person, await invited(home, person, ['reader']), db);
		const roles = async () => (await membershipIn(person, home.membership.organisationId, db))?.roles;
		expect(await roles()).toEqual(['reader']);
		await changeRoles(home.membership, person.id, ['author'], db);
		expect(await roles()).toEqual(['author']);
		await removeMember(home.membership, person.id, db);
		expect(await roles()).toBeUndefined();
		const left = await db.$count(memberships, eq(memberships.userId, person.id));
		expect(left).toBe(0);
	});
});

describe('maskedAddress', () => {
	it.each([
		['runa.aldous@company.example', 'r…@company.example'],
		['a@b.example', 'a…@b.example'],
		['"odd@local"@b.example', '"…@b.example']
	])('%s', (email, masked) => {
		expect(maskedAddress(email)).toBe(masked);
	});
});
