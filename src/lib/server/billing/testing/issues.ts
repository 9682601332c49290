import { randomBytes } from 'node:crypto';
import type { Database } from '../../db';
import { dossiers, issues, memberships, organisations, reports, users } from '../../db/schema';
import { enqueue } from '../../jobs/queue';
import { emptyReportText } from '../../../report/text';

export interface QueuedIssues {
	organisationId: string;
	/** The author who asked for them. */
	authorId: string;
	issueIds: string[];
}

/** An organisation with approved reports, each with a queued issue, as a request would leave them. */
export async function queuedIssues(db: Database, count: number, into?: string): Promise<QueuedIssues> {
	return db.transaction(async (tx) => {
		const organisationId = into ?? (await newOrganisation(tx));
		const authorId = await newAuthor(tx, organisationId);
		const [dossier] = await tx.insert(dossiers).values({ organisationId, title: 'Roof' }).returning();
		if (dossier === undefined) throw new Error('The dossier was not stored.');
		const made = await tx
			.insert(reports)
			.values(
				Array.from({ length: count }, () => ({
					organisationId,
					dossierId: dossier.id,
					number: `TB-${randomBytes(5).toString('hex')}`,
					template: 'client-memo',
					title: 'Memo',
					text: emptyReportText,
					state: 'approved' as const
				}))
			)
			.returning({ id: reports.id });
		const queued = await tx
			.insert(issues)
			.values(
				made.map(({ id }) => ({
					organisationId,
					reportId: id,
					revision: 1,
					code: randomBytes(6).toString('hex'),
					model: {},
					requestedBy: authorId
				}))
			)
			.returning({ id: issues.id });
		const issueIds = queued.map(({ id }) => id);
		for (const issueId of issueIds) await enqueue(tx, 'issue-report', { issueId }, { organisationId });
		return { organisationId, authorId, issueIds };
	});
}

async function newOrganisation(db: Pick<Database, 'insert'>): Promise<string> {
	const [row] = await db
		.insert(organisations)
		.values({ name: 'Tallis Brook Consulting', numberPrefix: 'TB' })
		.returning({ id: organisations.id });
	if (row === undefined) throw new Error('The organisation was not stored.');
	return row.id;
}

async function newAuthor(db: Pick<Database, 'insert'>, organisationId: string): Promise<string> {
	const email = `${randomBytes(6).toString('hex')}@people.example`;
	const [row] = await db.insert(users).values({ name: 'An author', email }).returning({ id: users.id });
	if (row === undefined) throw new Error('The author was not stored.');
	await db.insert(memberships).values({ organisationId, userId: row.id, roles: ['author'] });
	return row.id;
}
