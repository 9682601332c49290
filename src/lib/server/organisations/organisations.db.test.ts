import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
	ConflictError,
	ForbiddenError,
	InvalidInputError,
	NotFoundError,
	TooManyRequestsError
} from '../access/errors';
import type { Membership, MemberRole } from '../access/membership';
import type { Database } from '../db';
import { auditEvents, memberships, organisations, users } from '../db/schema';
import { testDatabase } from '../testing/db';
import { testOrganisation, testPerson } from '../testing/people';
import { createOrganisation } from './create';
import { changeRoles, leaveOrganisation, listMembers, removeMember } from './members';
import { currentMembership, membershipIn, membershipsOf } from './memberships';
import { enrolForSetUp } from './set-up';
import { readOrganisation, updateOrganisation } from './settings';

let db: Database;
let drop: () => Promise<void>;

beforeAll(async () => {
	({ db, drop } = await testDatabase());
});
afterAll(() => drop());

const letterhead = {
	name: 'Tallis Brook Consulting Ltd',
	address: ['4 Mill Yard', 'Tallis'],
	registrationLine: 'Registered in Tallis, no. 12',
	numberPrefix: 'TBC',
	selfApproval: false
};

async function owned() {
	const owner = await testPerson(db, 'Owner');
	return { owner, membership: await testOrganisation(db, owner) };
}

async function withMember(roles: readonly MemberRole[]) {
	const { owner, membership } = await owned();
	const person = await testPerson(db, 'Member');
	await enrolForSetUp(membership, { email: person.email, roles }, db);
	const own = await membershipIn(person, membership.organisationId, db);
	if (own === null) throw new Error('The member was not added.');
	return { owner, membership, person, own };
}

async function rolesOf(membership: Membership, userId: string) {
	const [row] = await db
		.select({ roles: memberships.roles })
		.from(memberships)
		.where(and(eq(memberships.organisationId, membership.organisationId), eq(memberships.userId, userId)));
	return row?.roles ?? null;
}

describe('a new organisation', () => {
	it('belongs to its founder, who is owner, author, reviewer and billing contact', async () => {
		const person = await testPerson(db);
		const made = await createOrganisation(person, { name: 'Own', address: ['A'], numberPrefix: 'OW' }, db);
		expect(await membershipsOf(person, db)).toEqual([
			{ ...made, roles: ['owner', 'author', 'reviewer', 'billing'] }
		]);
		expect(await readOrganisation(made, db)).toMatchObject({
			name: 'Own',
			address: ['A'],
			selfApproval: true
		});
		const events = await db
			.select()
			.from(auditEvents)
			.where(eq(auditEvents.organisationId, made.organisationId));
		expect(events.map((event) => event.action)).toEqual(['organisation.create']);
	});

	it('is not made eleven times a day', async () => {
		const person = await testPerson(db);
		const input = { name: 'Own', address: [], numberPrefix: 'OW' };
		for (let i = 0; i < 10; i++) await createOrganisation(person, input, db);
		await expect(createOrganisation(person, input, db)).rejects.toThrow(TooManyRequestsError);
	});
});

describe('settings', () => {
	it('are changed by an owner', async () => {
		const { membership } = await owned();
		await updateOrganisation(membership, letterhead, db);
		expect(await readOrganisation(membership, db)).toEqual({ id: membership.organisationId, ...letterhead });
	});

	it.each(['author', 'reviewer', 'reader', 'billing'] as const)('are not changed by a %s', async (role) => {
		const { membership, own } = await withMember([role]);
		await expect(updateOrganisation(own, letterhead, db)).rejects.toThrow(ForbiddenError);
		expect((await readOrganisation(membership, db)).name).toBe('Tallis Brook Consulting');
		await readOrganisation(own, db);
	});

	it("of one organisation are out of the reach of another's owner", async () => {
		const [one, other] = [await owned(), await owned()];
		await updateOrganisation(other.membership, letterhead, db);
		expect((await readOrganisation(one.membership, db)).name).toBe('Tallis Brook Consulting');
		await expect(readOrganisation(null, db)).rejects.toThrow(NotFoundError);
	});
});

describe('members', () => {
	it('are listed with their roles, those of this organisation only', async () => {
		const { membership, person } = await withMember(['reader']);
		const { own: stranger } = await withMember(['reader']);
		const list = await listMembers(membership, db);
		expect(list.map((one) => [one.name, one.roles])).toEqual([
			['Member', ['reader']],
			['Owner', ['owner', 'author', 'reviewer', 'billing']]
		]);
		const theirs = await listMembers(stranger, db);
		expect(theirs.map((one) => one.userId)).not.toContain(person.id);
		await expect(listMembers(null, db)).rejects.toThrow(NotFoundError);
	});

	it('are not shown to a billing contact', async () => {
		const { own } = await withMember(['billing']);
		await expect(listMembers(own, db)).rejects.toThrow(NotFoundError);
	});

	it('set up need a confirmed account, are added once and with a role', async () => {
		const { membership, person } = await withMember(['reader']);
		const add = (email: string, roles: readonly MemberRole[] = ['reader']) =>
			enrolForSetUp(membership, { email, roles }, db);
		await expect(add('nobody@test.example')).rejects.toThrow(InvalidInputError);
		await expect(add(person.email)).rejects.toThrow(ConflictError);
		const other = await testPerson(db);
		await expect(add(other.email, [])).rejects.toThrow(InvalidInputError);
		await db.update(users).set({ emailVerified: null }).where(eq(users.id, other.id));
		await expect(add(other.email)).rejects.toThrow(InvalidInputError);
		expect(await rolesOf(membership, other.id)).toBeNull();
	});

	it.each(['author', 'reviewer', 'reader', 'billing'] as const)('are not managed by a %s', async (role) => {
		const { owner, membership, person, own } = await withMember([role]);
		const refusal = role === 'billing' ? NotFoundError : ForbiddenError;
		await expect(changeRoles(own, person.id, ['owner'], db)).rejects.toThrow(refusal);
		await expect(removeMember(own, owner.id, db)).rejects.toThrow(refusal);
		const another = await testPerson(db);
		await expect(enrolForSetUp(own, { email: another.email, roles: ['owner'] }, db)).rejects.toThrow(refusal);
		expect(await rolesOf(membership, person.id)).toEqual([role]);
		expect(await listMembers(membership, db)).toHaveLength(2);
	});

	it('of another organisation are not found, whatever id is sent', async () => {
		const { membership, person } = await withMember(['reader']);
		const { membership: stranger } = await owned();
		await expect(changeRoles(stranger, person.id, ['owner'], db)).rejects.toThrow(NotFoundError);
		await expect(removeMember(stranger, person.id, db)).rejects.toThrow(NotFoundError);
		expect(await rolesOf(membership, person.id)).toEqual(['reader']);
	});

	it('have their changed roles at once', async () => {
		const { membership, person } = await withMember(['reader']);
		await changeRoles(membership, person.id, ['author', 'billing'], db);
		expect((await currentMembership(person, membership.organisationId, db))?.roles).toEqual([
			'author',
			'billing'
		]);
		await removeMember(membership, person.id, db);
		expect(await currentMembership(person, membership.organisationId, db)).toBeNull();
	});

	it('always include an owner', async () => {
		const { owner, membership, person } = await withMember(['reader']);
		await expect(changeRoles(membership, owner.id, ['author'], db)).rejects.toThrow(ConflictError);
		await expect(removeMember(membership, owner.id, db)).rejects.toThrow(ConflictError);
		expect(await rolesOf(membership, owner.id)).toContain('owner');
		await changeRoles(membership, person.id, ['owner'], db);
		await changeRoles(membership, owner.id, ['author'], db);
		expect(await rolesOf(membership, owner.id)).toEqual(['author']);
	});

	it('include an owner also when all owners step down at the same moment', async () => {
		const { owner, membership, person } = await withMember(['owner']);
		const outcomes = await Promise.allSettled([
			changeRoles(membership, owner.id, ['author'], db),
			changeRoles(membership, person.id, ['author'], db)
		]);
		expect(outcomes.filter((one) => one.status === 'fulfilled')).toHaveLength(1);
		const roles = (await listMembers(membership, db)).flatMap((one) => one.roles);
		expect(roles.filter((role) => role === 'owner')).toHaveLength(1);
	});
});

describe('leaving', () => {
	it('is open to every role, counts at once, and is noted', async () => {
		const { membership, person, own } = await withMember(['reader']);
		await leaveOrganisation(person, own.organisationId, db);
		expect(await currentMembership(person, membership.organisationId, db)).toBeNull();
		const events = await db.select().from(auditEvents).where(eq(auditEvents.subject, person.id));
		expect(events.map(({ action, userId }) => [action, userId])).toContainEqual(['members.leave', person.id]);
		await expect(leaveOrganisation(person, own.organisationId, db)).rejects.toThrow(NotFoundError);
	});

	it('is not open to the last owner, who is told what to do first', async () => {
		const { owner, membership, person } = await withMember(['reader']);
		await expect(leaveOrganisation(owner, membership.organisationId, db)).rejects.toThrow(
			/Make somebody else an owner first/
		);
		await changeRoles(membership, person.id, ['owner'], db);
		await leaveOrganisation(owner, membership.organisationId, db);
		expect((await listMembers({ ...membership, userId: person.id }, db)).map((one) => one.userId)).toEqual([
			person.id
		]);
	});

	it('leaves an owner also when both owners leave at the same moment', async () => {
		const { owner, membership, person } = await withMember(['owner']);
		const outcomes = await Promise.allSettled([
			leaveOrganisation(owner, membership.organisationId, db),
			leaveOrganisation(person, membership.organisationId, db)
		]);
		expect(outcomes.filter((one) => one.status === 'fulfilled')).toHaveLength(1);
		expect(await listMembers(membership, db)).toHaveLength(1);
	});
});

describe('the current organisation', () => {
	it('is the chosen one only while the person belongs to it', async () => {
		const { owner, membership: first } = await owned();
		const second = await testOrganisation(db, owner, ['reader'], 'Second');
		const { membership: foreign } = await owned();
		expect((await currentMembership(owner, null, db))?.organisationId).toBe(first.organisationId);
		expect(await currentMembership(owner, second.organisationId, db)).toEqual(second);
		expect((await currentMembership(owner, foreign.organisationId, db))?.organisationId).toBe(
			first.organisationId
		);
		await db.delete(organisations).where(eq(organisations.id, second.organisationId));
		expect((await currentMembership(owner, second.organisationId, db))?.organisationId).toBe(
			first.organisationId
		);
	});
});
