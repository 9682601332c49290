import { randomBytes, randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type pg from 'pg';
import type { Membership } from '$lib/server/access/membership';
import { openSession } from '$lib/server/accounts/sessions';
import { hashToken, newToken } from '$lib/server/accounts/tokens';
import { openDatabase, type Database } from '$lib/server/db';
import { checkouts, issues, shareLinks, users } from '$lib/server/db/schema';
import { enterFigure } from '$lib/server/reviews/own-figure';
import { reviewView } from '$lib/server/reviews/view';
import { setTestEnvironment } from '$lib/server/testing/environment';
import { copyDossiers } from './copy';
import { untilQuiet } from './digest';
import { makeDossier, ownFigure } from './dossier';
import type { Subject, Values } from './entry';
import {
	addGuest,
	addMember,
	inviteTo,
	join,
	makeHouse,
	makePerson,
	makeSubjects,
	type House
} from './people';
import { gist, post, type Session } from './requests';

/*
 * Two organisations with people of every role, each with work of every kind. `own` is what the members' organisation
 * and its guest's dossier hold, `foreign` the same of the other organisation, `elsewhere` of the other dossier.
 */

/** Words that stand in every text of one dossier, or in the name of a member who did nothing; nowhere else. */
export const markers = {
	own: 'Quillmarsh',
	elsewhere: 'Ostrelby',
	foreign: 'Zemvarrow',
	member: 'Hesterwyn'
} as const;
export type Marker = keyof typeof markers;

export interface World {
	address: string;
	db: Database;
	pool: pg.Pool;
	house: House;
	own: Values;
	elsewhere: Values;
	foreign: Values;
	/** Ids of the right form that nothing has. */
	nowhere: Values;
	sessions: Readonly<Record<Subject, Session>>;
	/** A copy of all that the own organisation holds, for one request of one person that changes it. */
	copyFor: (subject: Subject) => Promise<Values>;
	/** Digest of a report of the own organisation, as a review page shows it. */
	digestOf: (reportId: string) => Promise<string>;
	/** Enters somebody's figure beside a report's result. @returns its id */
	enterFigure: (subject: Subject, reportId: string, runId: string) => Promise<string>;
	/** Makes somebody a member of one more organisation. @returns its id */
	joinAnother: (subject: Subject) => Promise<string>;
	/** Invites somebody as guest of a dossier. @returns the token of the link */
	invite: (subject: Subject, dossierId: string) => Promise<string>;
	/** A further session of somebody. */
	freshSession: (subject: Subject) => Promise<Session>;
	close: () => Promise<void>;
}

async function makeMember(db: Database, house: House): Promise<string> {
	return (await join(db, house, `${markers.member} ${randomUUID().slice(0, 6)}`, ['reader'])).userId;
}

export async function makeWorld(address: string, databaseUrl: string): Promise<World> {
	setTestEnvironment({ DATABASE_URL: databaseUrl, ORIGIN: address });
	const { db, pool } = openDatabase(databaseUrl, 10);
	const house = await makeHouse(db, 'Wexcombe Partners', 'QM');
	const other = await makeHouse(db, `${markers.foreign} Bureau`, 'ZV');
	const [ownDossier, elsewhere, foreignDossier] = [
		await makeDossier(db, house, markers.own),
		await makeDossier(db, house, markers.elsewhere),
		await makeDossier(db, other, markers.foreign)
	];
	const { userIds, tokens } = await makeSubjects(db, house, {
		guest: [ownDossier.dossier as string, ownDossier.emptyDossier as string],
		'guest elsewhere': [elsewhere.dossier as string, elsewhere.emptyDossier as string]
	});
	const sessions = Object.fromEntries(
		Object.entries(tokens).map(([subject, token], index) => [subject, { address, token, index }])
	) as unknown as Record<Subject, Session>;

	const sessionOf = async ({ userId }: Membership, index: number): Promise<Session> => {
		return { address, token: await openSession(userId, 'matrix', db), index };
	};
	const foreignAuthor = await sessionOf(other.author, 20);
	const foreignBuyer = await sessionOf(await join(db, other, 'Buyer', ['billing']), 21);
	for (const [session, ids] of [
		[sessions.author, ownDossier],
		[sessions.author, elsewhere],
		[foreignAuthor, foreignDossier]
	] as const) {
		await issue(session, ids);
	}
	await buy(sessions.billing);
	await buy(foreignBuyer);
	await untilQuiet(pool);
	const complete = async (ids: Values, of: House, session: string): Promise<Values> => {
		const dossier = ids.dossier as string;
		const invited = await inviteTo(db, of, `${randomUUID()}@people.example`, dossier);
		const link = await shareIssued(db, of, ids.issued as string);
		const guestPerson = await makePerson(db, 'Guest of the fixtures');
		await addGuest(db, of, dossier, guestPerson);
		return {
			...ids,
			organisation: of.id,
			leftOrganisation: of.id,
			member: await makeMember(db, of),
			memberInvitation: (await inviteTo(db, of, `${randomUUID()}@people.example`, null)).id,
			guestInvitation: invited.id,
			invitationToken: invited.token,
			guestPerson,
			link: link.id,
			shareToken: link.token,
			ownSession: hashToken(session),
			checkout: await purchaseOf(db, of),
			code: await codeOf(db, ids.issued as string)
		};
	};
	const idle = await makeMember(db, house);
	const own = await complete(ownDossier, house, await openSession(idle, 'matrix', db));
	const foreign = await complete(foreignDossier, other, foreignAuthor.token ?? '');

	return {
		address,
		db,
		pool,
		house,
		own,
		elsewhere: { ...own, ...elsewhere },
		foreign,
		nowhere: {
			...Object.fromEntries(Object.keys(own).map((name) => [name, randomUUID()])),
			ownSession: randomBytes(32).toString('hex'),
			invitationToken: newToken(),
			shareToken: newToken(),
			checkout: 'cs_test_nobody',
			code: '2222-2222'
		},
		sessions,
		copyFor: async (subject) => {
			const ids = await copyDossiers(db, [ownDossier.dossier as string, ownDossier.deletedDossier as string]);
			const copied = Object.fromEntries(Object.entries(own).map(([name, id]) => [name, ids.get(id) ?? id]));
			const userId = userIds[subject];
			if (subject === 'guest' && userId !== null) await addGuest(db, house, copied.dossier as string, userId);
			return {
				...copied,
				member: await makeMember(db, house),
				// One is sent again and another taken back, at the same time.
				memberInvitation: (await inviteTo(db, house, `${randomUUID()}@people.example`, null)).id,
				code: await codeOf(db, copied.issued as string)
			};
		},
		digestOf: async (reportId) => (await reviewView(house.reviewer, reportId, db)).digest,
		enterFigure: async (subject, reportId, runId) => {
			const membership: Membership = { ...house.reviewer, userId: userIds[subject] ?? '' };
			return enterFigure(membership, reportId, ownFigure(runId), db);
		},
		joinAnother: async (subject) => {
			const another = await makeHouse(db, 'Another House', 'AH');
			await join(db, another, 'Owner of another house', ['owner']);
			await addMember(db, another, userIds[subject] ?? '', ['reader']);
			return another.id;
		},
		invite: async (subject, dossierId) => {
			const [row] = await db
				.select({ email: users.email })
				.from(users)
				.where(eq(users.id, userIds[subject] ?? ''));
			return (await inviteTo(db, house, row?.email ?? '', dossierId)).token;
		},
		freshSession: async (subject) => {
			const userId = userIds[subject];
			return userId === null
				? sessions[subject]
				: { ...sessions[subject], token: await openSession(userId, 'matrix', db) };
		},
		close: () => pool.end()
	};
}

/** Has a report issued as a member would. */
async function issue(session: Session, ids: Values): Promise<void> {
	const answer = await post(session, `/reports/${ids.issued}/issue`, {});
	if (answer.status !== 303) throw new Error(`A report was not issued: ${answer.status} ${gist(answer)}`);
}

/** Sets out to buy, so that there is a customer and an unpaid purchase. */
async function buy(session: Session): Promise<void> {
	const answer = await post(session, '/billing/review', { packs: '1' });
	if (answer.status !== 303) throw new Error(`Nothing could be bought: ${answer.status} ${gist(answer)}`);
}

async function purchaseOf(db: Database, house: House): Promise<string> {
	const [row] = await db
		.select({ session: checkouts.sessionId })
		.from(checkouts)
		.where(eq(checkouts.organisationId, house.id));
	if (!row?.session) throw new Error('A purchase of the fixtures has no session.');
	return row.session;
}

async function codeOf(db: Database, reportId: string): Promise<string> {
	const [row] = await db
		.select({ code: issues.code, state: issues.state })
		.from(issues)
		.where(eq(issues.reportId, reportId));
	if (row?.state !== 'done') throw new Error(`A report of the fixtures is ${row?.state} instead of issued.`);
	return row.code;
}

/** A link to an issued report, for a recipient without an account. */
async function shareIssued(
	db: Database,
	house: House,
	reportId: string
): Promise<{ id: string; token: string }> {
	const [issue] = await db.select({ id: issues.id }).from(issues).where(eq(issues.reportId, reportId));
	const token = newToken();
	const [row] = await db
		.insert(shareLinks)
		.values({
			organisationId: house.id,
			reportId,
			issueId: issue?.id ?? '',
			tokenHash: hashToken(token),
			recipient: 'The client',
			createdBy: house.author.userId
		})
		.returning({ id: shareLinks.id });
	if (row === undefined) throw new Error('No link was stored.');
	return { id: row.id, token };
}
