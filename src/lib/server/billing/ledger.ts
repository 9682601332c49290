import { and, eq, inArray, sql } from 'drizzle-orm';
import { database, type Queryable, type Transaction } from '../db';
import { exportDebits, exportGrants, issues } from '../db/schema';
import { NoExportsError } from './errors';
import { missingMonth, spendable, type GrantFacts, type GrantKind } from './ledger-rules';
import { plans } from './plans';
import { allowanceOf, lockOrganisation, standingOf, type PlanStanding } from './standing';

/*
 * Exports as a ledger: grants, and debits on them. A balance is a sum over rows. Whoever writes holds the
 * organisation's row.
 */

/** A source of exports that are left. */
export interface ExportSource {
	kind: GrantKind;
	left: number;
	of: number;
	/** When they run out, or for a month's when the next month's come; null for never. */
	until: Date | null;
}

export interface ExportsLeft extends PlanStanding {
	left: number;
	/** Reports being issued at this moment: each will take one. */
	waiting: number;
	/** Money stops new exports, whatever is left. */
	blocked: boolean;
	/** In the order in which they are used. */
	sources: ExportSource[];
}

async function grantsOf(organisationId: string, db: Queryable): Promise<GrantFacts[]> {
	const rows = await db
		.select({ grant: exportGrants, taken: sql<number>`coalesce(sum(${exportDebits.amount}), 0)::int` })
		.from(exportGrants)
		.leftJoin(exportDebits, eq(exportDebits.grantId, exportGrants.id))
		.where(eq(exportGrants.organisationId, organisationId))
		.groupBy(exportGrants.id);
	return rows.map(({ grant, taken }) => ({ ...grant, left: grant.amount - taken }));
}

async function waitingIssues(organisationId: string, db: Queryable): Promise<number> {
	return db.$count(
		issues,
		and(eq(issues.organisationId, organisationId), inArray(issues.state, ['queued', 'rendering', 'signing']))
	);
}

/** Gives the month's exports that are still to be given. Under the organisation's lock. */
async function grantMonth(organisationId: string, standing: PlanStanding, tx: Transaction): Promise<void> {
	const grants = await grantsOf(organisationId, tx);
	const missing = missingMonth(grants, allowanceOf(standing), standing.now);
	if (missing === undefined) return;
	const { key, amount, window } = missing;
	await tx
		.insert(exportGrants)
		.values({ organisationId, kind: 'month', key, amount, validFrom: window.start, validUntil: window.end })
		.onConflictDoNothing();
}

/** Enters the running month's exports as soon as its seats are known, so that fewer seats later take none away. */
export async function enterMonth(tx: Transaction, organisationId: string): Promise<void> {
	await lockOrganisation(tx, organisationId);
	await grantMonth(organisationId, await standingOf(organisationId, tx), tx);
}

/** Exports left, with where they come from. Writes nothing: a month's exports count before they are entered. */
export async function exportsLeft(organisationId: string, db: Queryable = database()): Promise<ExportsLeft> {
	const standing = await standingOf(organisationId, db);
	const allowance = allowanceOf(standing);
	const grants = await grantsOf(organisationId, db);
	const missing = missingMonth(grants, allowance, standing.now);
	if (missing !== undefined) {
		const { key, amount, window } = missing;
		grants.push({
			id: '',
			kind: 'month',
			key,
			amount,
			left: amount,
			validFrom: window.start,
			validUntil: window.end
		});
	}
	const usable = spendable(grants, { ...allowance, blocked: false }, standing.now);
	return {
		...standing,
		left: usable.reduce((sum, { left }) => sum + left, 0),
		waiting: await waitingIssues(organisationId, db),
		blocked: allowance.blocked,
		sources: sourcesOf(usable)
	};
}

/** What was given in parts for one month is one source. */
function sourcesOf(usable: readonly GrantFacts[]): ExportSource[] {
	const sources: ExportSource[] = [];
	for (const { kind, left, amount, validUntil } of usable) {
		const same = sources.find((one) => kind === 'month' && one.kind === 'month');
		if (same === undefined) sources.push({ kind, left, of: amount, until: validUntil });
		else {
			same.left += left;
			same.of += amount;
		}
	}
	return sources;
}

function refusal({ access }: PlanStanding): string {
	if (access?.standing === 'owing') {
		return 'An invoice is open, and new exports stop until it is paid. An owner or the billing contact can pay it from the billing page; the report stays approved and can be issued then.';
	}
	if (access?.blocked === true) {
		return 'The state of the plan is not known, so nothing new is issued for now. An owner or the billing contact can look into it on the billing page; the report stays approved.';
	}
	const { exports } = plans().pack;
	return `No export is left. An owner or the billing contact can choose a plan or buy a pack of ${exports} exports on the billing page; the report stays approved and can be issued then.`;
}

/**
 * Refuses to start an issue that could not be finished: none left beyond those that reports under way will take. Call
 * it in the transaction that queues the issue, before the issue is stored.
 * @throws NoExportsError with the way to get more
 */
export async function requireExport(tx: Transaction, organisationId: string): Promise<void> {
	await lockOrganisation(tx, organisationId);
	const found = await exportsLeft(organisationId, tx);
	if (found.blocked || found.left === 0) throw new NoExportsError(refusal(found));
	if (found.left - found.waiting > 0) return;
	const { exports } = plans().pack;
	throw new NoExportsError(
		`Every export that is left is taken by a report that is being issued at this moment. An owner or the billing contact can buy a pack of ${exports} exports on the billing page.`
	);
}

/**
 * Takes one export for an issue: exactly one, however often it is called. Belongs into the transaction that stores the
 * signed file, so that neither is kept without the other.
 * @throws NoExportsError where none is left; the transaction must then be given up
 */
export async function debitExport(tx: Transaction, organisationId: string, issueId: string): Promise<void> {
	await lockOrganisation(tx, organisationId);
	const before = await tx
		.select({ id: exportDebits.id })
		.from(exportDebits)
		.where(eq(exportDebits.issueId, issueId));
	if (before.length > 0) return;
	const standing = await standingOf(organisationId, tx);
	await grantMonth(organisationId, standing, tx);
	const [grant] = spendable(await grantsOf(organisationId, tx), allowanceOf(standing), standing.now);
	if (grant === undefined) throw new NoExportsError(refusal(standing));
	await tx.insert(exportDebits).values({
		organisationId,
		grantId: grant.id,
		kind: 'issue',
		issueId,
		key: `issue:${issueId}`,
		amount: 1
	});
}

/** Exports to try: once for whoever founds an organisation, however many they found. */
export async function grantTrial(db: Queryable, organisationId: string, founderId: string): Promise<void> {
	const { exports } = plans().trial;
	if (exports === 0) return;
	await db
		.insert(exportGrants)
		.values({ organisationId, kind: 'trial', key: `trial:${founderId}`, amount: exports })
		.onConflictDoNothing();
}

/** The exports of a paid purchase of packs: once for its session. */
export async function grantPack(
	db: Queryable,
	organisationId: string,
	sessionId: string,
	packs: number
): Promise<void> {
	const { exports, months } = plans().pack;
	await db
		.insert(exportGrants)
		.values({
			organisationId,
			kind: 'pack',
			key: `pack:${sessionId}`,
			amount: packs * exports,
			validUntil: sql`now() + make_interval(months => ${months})`
		})
		.onConflictDoNothing();
}
