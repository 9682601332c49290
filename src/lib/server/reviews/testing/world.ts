import { eq } from 'drizzle-orm';
import { chooseMethod } from '$lib/calculation/new-draft';
import { methodById } from '$lib/methods';
import type { Membership } from '../../access/membership';
import { giveExports } from '../../billing/testing/exports';
import { createCalculation, saveDraft } from '../../calculations/change';
import { getCalculation } from '../../calculations/load';
import { startRun } from '../../calculations/runs';
import type { Database } from '../../db';
import { dossierGuests, dossiers, issues, organisations, rateWindows, reports } from '../../db/schema';
import { createReport, saveReport } from '../../reports/change';
import { getReport } from '../../reports/load';
import { member } from '../../testing/members';
import { approveReport } from '../decide';
import { sendForReview } from '../send';
import { reviewView } from '../view';

/** An organisation with people of every role, a dossier with a computed calculation, and a guest of that dossier. */
export interface World {
	owner: Membership;
	author: Membership;
	reviewer: Membership;
	/** Holds both roles, and wrote nothing unless a test lets them. */
	both: Membership;
	reader: Membership;
	guest: Membership;
	/** Every role, in another organisation. */
	stranger: Membership;
	dossierId: string;
	calculationId: string;
	runId: string;
	/** A draft report of the author's. */
	draft(): Promise<string>;
	/** The same, sent to the reviewer. */
	sent(): Promise<string>;
	/** The same, approved by the reviewer. */
	approved(): Promise<string>;
	send(id: string, by?: Membership, to?: string[]): Promise<string>;
	approve(id: string, by?: Membership): Promise<void>;
	save(id: string, text?: Record<string, unknown>, by?: Membership): Promise<number>;
	policy(selfApproval: boolean): Promise<void>;
	stateOf(id: string): Promise<string>;
	/** Ends the issue of a report as a worker would, without its PDF. */
	endIssue(id: string, state: 'done' | 'failed'): Promise<void>;
}

async function computedTile(author: Membership, dossierId: string, db: Database) {
	const method = methodById('solar-reflectance-index');
	if (method === undefined) throw new Error('no method');
	const id = await createCalculation(author, dossierId, { title: 'Tile', kind: 'find-value' }, db);
	const { draft, version } = await getCalculation(author, id, db);
	const filled = chooseMethod(draft, method);
	for (const [input, value] of [
		['solarReflectance', '0.33'],
		['thermalEmittance', '0.90']
	] as const) {
		const before = filled.assumptions[input];
		if (before === undefined) throw new Error('no input');
		filled.assumptions[input] = {
			...before,
			value,
			source: { kind: 'citation', text: 'A table', evidenceId: null }
		};
	}
	await saveDraft(author, id, { draft: filled, baseVersion: version }, db);
	return { calculationId: id, runId: await startRun(author, id, db) };
}

export async function reviewWorld(db: Database, selfApproval = false): Promise<World> {
	const owner = await member(db, ['owner']);
	const author = await member(db, ['author'], owner);
	const reviewer = await member(db, ['reviewer'], owner);
	const both = await member(db, ['author', 'reviewer'], owner);
	const reader = await member(db, ['reader'], owner);
	const stranger = await member(db, ['owner', 'author', 'reviewer']);
	const outside = await member(db, ['author']);
	const { organisationId } = owner;
	await giveExports(db, organisationId, 1000);
	const policy = async (allowed: boolean) => {
		await db
			.update(organisations)
			.set({ selfApproval: allowed, address: ['1 Test Road'] })
			.where(eq(organisations.id, organisationId));
	};
	await policy(selfApproval);
	const [dossier] = await db
		.insert(dossiers)
		.values({ organisationId, title: 'Tiles', question: 'What index has the tile?', client: 'A Client' })
		.returning({ id: dossiers.id });
	if (dossier === undefined) throw new Error('not stored');
	const dossierId = dossier.id;
	await db.insert(dossierGuests).values({ dossierId, organisationId, userId: outside.userId });
	const guest: Membership = { ...owner, userId: outside.userId, roles: ['guest'], onlyDossiers: [dossierId] };
	const { calculationId, runId } = await computedTile(author, dossierId, db);

	const draft = () => createReport(author, dossierId, { template: 'client-memo', runId }, db);
	const send: World['send'] = async (id, by = author, to = [reviewer.userId]) => {
		// Tests send more often in an hour than a person may.
		await db.delete(rateWindows);
		const { version } = await getReport(by, id, db);
		return sendForReview(by, id, { reviewers: to, note: 'Look at the emittance.', baseVersion: version }, db);
	};
	const approve: World['approve'] = async (id, by = reviewer) => {
		const { digest } = await reviewView(by, id, db);
		await approveReport(by, id, { statement: 'I checked the inputs and computed it again.', digest }, db);
	};
	const sent = async () => {
		const id = await draft();
		await send(id);
		return id;
	};
	return {
		owner,
		author,
		reviewer,
		both,
		reader,
		guest,
		stranger,
		dossierId,
		calculationId,
		runId,
		draft,
		sent,
		async approved() {
			const id = await sent();
			await approve(id);
			return id;
		},
		send,
		approve,
		async save(id, text = {}, by = author) {
			const report = await getReport(by, id, db);
			const { title, runIds, version } = report;
			return saveReport(
				by,
				id,
				{ title, text: { ...report.text, ...text }, runIds, baseVersion: version },
				db
			);
		},
		policy,
		async stateOf(id) {
			const [row] = await db.select({ state: reports.state }).from(reports).where(eq(reports.id, id));
			return row?.state ?? 'gone';
		},
		async endIssue(id, state) {
			await db.update(issues).set({ state }).where(eq(issues.reportId, id));
			if (state === 'done') await db.update(reports).set({ state: 'issued' }).where(eq(reports.id, id));
		}
	};
}
