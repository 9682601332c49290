import { eq } from 'drizzle-orm';
import { chooseMethod, newAssumption, numberInputs } from '../../calculation/new-draft';
import type { CalculationDraft } from '../../calculation/draft';
import { methodById } from '../../methods';
import type { Membership } from '../access/membership';
import { createCalculation, saveDraft } from '../calculations/change';
import { getCalculation } from '../calculations/load';
import { startRun } from '../calculations/runs';
import type { Database } from '../db';
import { dossiers } from '../db/schema';
import { createDossier } from '../dossiers/create';
import { createReport, saveReport } from '../reports/change';
import { issueReport } from '../reports/issue';
import { getReport } from '../reports/load';
import { demoWork, type DemoCalculation, type DemoDossier, type DemoReport } from './content';
import { review, type DemoPeople } from './review';

function filledIn(empty: CalculationDraft, given: DemoCalculation): CalculationDraft {
	const method = methodById(given.method);
	if (method === undefined) throw new Error(`The demo names a method that is not there: ${given.method}.`);
	const draft = chooseMethod(empty, method);
	for (const input of numberInputs(method)) {
		const assumption = given.assumptions[input.id];
		if (assumption === undefined) continue;
		const [spread, spreadValues] = assumption.spread ?? ['exact' as const, {}];
		draft.assumptions[input.id] = {
			...newAssumption(input),
			value: assumption.value,
			...(assumption.unit === undefined ? {} : { unit: assumption.unit }),
			spread,
			spreadValues,
			source: { text: '', evidenceId: null, ...assumption.source },
			note: assumption.note ?? ''
		};
	}
	return {
		...draft,
		options: { ...draft.options, ...given.options },
		temperatureUnit: given.temperatureUnit ?? 'degC',
		claim: draft.claim === null ? null : { ...draft.claim, ...given.claim },
		limit: draft.limit === null ? null : { ...draft.limit, ...given.limit },
		visited: given.unfinished === true ? [] : method.groups.map(({ id }) => id)
	};
}

async function calculate(
	membership: Membership,
	dossierId: string,
	given: DemoCalculation,
	db: Database
): Promise<string | null> {
	const id = await createCalculation(membership, dossierId, { title: given.title, kind: given.kind }, db);
	const { draft, version } = await getCalculation(membership, id, db);
	await saveDraft(membership, id, { draft: filledIn(draft, given), baseVersion: version }, db);
	return given.unfinished === true ? null : startRun(membership, id, db);
}

async function report(
	membership: Membership,
	dossierId: string,
	given: DemoReport,
	runs: ReadonlyMap<string, string>,
	people: DemoPeople,
	db: Database
): Promise<void> {
	const shown = given.on.map((title) => {
		const run = runs.get(title);
		if (run === undefined) throw new Error(`The demo reports a calculation that is not there: ${title}.`);
		return run;
	});
	const [first] = shown;
	if (first === undefined) throw new Error(`The demo's report has no result: ${given.title}.`);
	const id = await createReport(membership, dossierId, { template: 'client-memo', runId: first }, db);
	const { text, version } = await getReport(membership, id, db);
	const { title, background, commentary, leftOut } = given;
	await saveReport(
		membership,
		id,
		{ title, text: { ...text, background, commentary, leftOut }, runIds: shown, baseVersion: version },
		db
	);
	if (given.review !== undefined) await review(membership, id, given.review, people, db);
	if (given.issue === true) await issueReport(membership, id, db);
}

async function load(
	membership: Membership,
	given: DemoDossier,
	people: DemoPeople,
	db: Database
): Promise<void> {
	const dossierId = await createDossier(membership, given.dossier, db);
	const runs = new Map<string, string>();
	for (const calculation of given.calculations) {
		const run = await calculate(membership, dossierId, calculation, db);
		if (run !== null) runs.set(calculation.title, run);
	}
	for (const one of given.reports ?? []) await report(membership, dossierId, one, runs, people, db);
}

/**
 * Gives each organisation of the demo its work, each dossier once: one whose title is there, be it deleted, is left
 * alone. The issue of a memo waits in the queue for a worker.
 */
export async function loadDemoWork(
	memberships: Readonly<Record<string, Membership>>,
	people: DemoPeople,
	db: Database
): Promise<void> {
	for (const [name, work] of Object.entries(demoWork)) {
		const membership = memberships[name];
		if (membership === undefined) continue;
		const present = await db
			.select({ title: dossiers.title })
			.from(dossiers)
			.where(eq(dossiers.organisationId, membership.organisationId));
		const titles = new Set(present.map(({ title }) => title));
		for (const one of work) {
			if (!titles.has(one.dossier.title)) await load(membership, one, people, db);
		}
	}
}
