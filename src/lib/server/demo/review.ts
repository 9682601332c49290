import type { Membership } from '../access/membership';
import type { Person } from '../accounts/person';
import type { Database } from '../db';
import { dossierGuests } from '../db/schema';
import { membershipIn } from '../organisations/memberships';
import { getReport } from '../reports/load';
import { addComment, answerComment } from '../reviews/comments';
import { approveReport, returnReport } from '../reviews/decide';
import { enterFigure } from '../reviews/own-figure';
import { sendForReview } from '../reviews/send';
import { reviewView } from '../reviews/view';
import type { DemoReview } from './content';

/** The demo's people by their address. */
export type DemoPeople = ReadonlyMap<string, Person>;

/** The reviewer as they act in the author's organisation; who is no member becomes a guest of the one dossier. */
async function reviewerIn(
	author: Membership,
	dossierId: string,
	person: Person,
	db: Database
): Promise<Membership> {
	const member = await membershipIn(person, author.organisationId, db);
	if (member !== null && member.onlyDossiers === null) return member;
	await db
		.insert(dossierGuests)
		.values({
			dossierId,
			userId: person.id,
			organisationId: author.organisationId,
			invitedBy: author.userId
		})
		.onConflictDoNothing();
	const guest = await membershipIn(person, author.organisationId, db);
	if (guest === null) throw new Error(`${person.name} did not become a guest of the demo's dossier.`);
	return guest;
}

/** Sends a report of the demo to its reviewer, who does what the demo says they did. */
export async function review(
	author: Membership,
	reportId: string,
	given: DemoReview,
	people: DemoPeople,
	db: Database
): Promise<void> {
	const person = people.get(given.by);
	if (person === undefined) throw new Error(`The demo has no reviewer ${given.by}.`);
	const report = await getReport(author, reportId, db);
	const reviewer = await reviewerIn(author, report.dossier.id, person, db);
	await sendForReview(
		author,
		reportId,
		{ reviewers: [person.id], note: given.note, baseVersion: report.version },
		db
	);
	const [runId = ''] = report.runIds;
	for (const { on, body, answer } of given.remarks ?? []) {
		const place = on.startsWith('input:') ? `run:${runId}/${on}` : on;
		const remark = await addComment(reviewer, reportId, { place, body }, db);
		if (answer !== undefined) await answerComment(author, remark, { body: answer }, db);
	}
	if (given.figure !== undefined) await enterFigure(reviewer, reportId, { runId, ...given.figure }, db);
	if (given.decision === undefined) return;
	const { kind, words } = given.decision;
	if (kind === 'returned') return returnReport(reviewer, reportId, { reasons: words }, db);
	const { digest } = await reviewView(reviewer, reportId, db);
	await approveReport(reviewer, reportId, { statement: words, digest }, db);
}
