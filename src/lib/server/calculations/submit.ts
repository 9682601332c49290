import type { CalculationDraft, QuestionKind } from '$lib/calculation/draft';
import {
	assumptionField,
	optionField,
	readComparison,
	readEvaluation,
	readGroup
} from '$lib/calculation/form-fields';
import { chooseKind, chooseMethod, numberInputs } from '$lib/calculation/new-draft';
import { methodById } from '$lib/methods';
import type { Method } from '$lib/methods/types';
import { requireAction } from '../access/can';
import { InvalidInputError, NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { database, type Database } from '../db';
import { uploadEvidence } from '../evidence/upload';
import { saveDraft } from './change';
import { getCalculation } from './load';
import { answerOf } from './preview';

/** What a submitted step left: everything typed is saved, faults or not. */
export interface Submitted {
	draft: CalculationDraft;
	version: number;
	/** Faults of this step's own fields. */
	faults: Record<string, string>;
	dossierId: string;
}

function methodOf(draft: CalculationDraft): Method {
	const method = draft.method === null ? undefined : methodById(draft.method);
	if (method === undefined) throw new NotFoundError('step');
	return method;
}

/** The version that the submitted page was made from. */
function baseVersion(form: FormData, current: number): number {
	const stated = Number(form.get('version'));
	return Number.isInteger(stated) && stated > 0 ? stated : current;
}

async function keepFiles(
	membership: Membership,
	dossierId: string,
	draft: CalculationDraft,
	inputs: readonly string[],
	form: FormData,
	db: Database
): Promise<{ draft: CalculationDraft; faults: Record<string, string> }> {
	const faults: Record<string, string> = {};
	const assumptions = { ...draft.assumptions };
	for (const input of inputs) {
		const field = assumptionField(input, 'file');
		const file = form.get(field);
		const assumption = assumptions[input];
		if (!(file instanceof File) || file.size === 0 || assumption === undefined) continue;
		try {
			const { id } = await uploadEvidence(
				membership,
				dossierId,
				{ name: file.name, bytes: Buffer.from(await file.arrayBuffer()) },
				db
			);
			const { source } = assumption;
			assumptions[input] = {
				...assumption,
				source: {
					...source,
					kind: 'file',
					evidenceId: id,
					text: source.kind === 'default' ? '' : source.text
				}
			};
		} catch (cause) {
			if (!(cause instanceof InvalidInputError)) throw cause;
			faults[field] = cause.message;
		}
	}
	return { draft: { ...draft, assumptions }, faults };
}

function ofPrefixes(
	faults: Readonly<Record<string, string>>,
	prefixes: readonly string[]
): Record<string, string> {
	return Object.fromEntries(
		Object.entries(faults).filter(([field]) => prefixes.some((prefix) => field.startsWith(prefix)))
	);
}

/**
 * Saves one section of assumptions as submitted, with the evidence files in it.
 * @throws NotFoundError for a section that the method does not have, ConflictError where somebody saved since.
 */
export async function submitGroup(
	membership: Membership | null,
	id: string,
	group: string,
	form: FormData,
	db: Database = database()
): Promise<Submitted> {
	requireAction(membership, 'calculation.write');
	const before = await getCalculation(membership, id, db);
	const method = methodOf(before.draft);
	if (!method.groups.some((known) => known.id === group)) throw new NotFoundError('step');
	const inputs = numberInputs(method).filter((input) => input.group === group);
	const read = readGroup(before.draft, method, group, form);
	const { draft, faults } = await keepFiles(
		membership,
		before.dossier.id,
		read,
		inputs.map((input) => input.id),
		form,
		db
	);
	const version = await saveDraft(
		membership,
		id,
		{ draft, baseVersion: baseVersion(form, before.version) },
		db
	);
	const answer = await answerOf(draft);
	const own = ofPrefixes(answer?.faults ?? {}, [
		...inputs.map((input) => `in.${input.id}.`),
		...method.options.filter((option) => option.group === group).map((option) => optionField(option.id))
	]);
	return { draft, version, faults: { ...own, ...faults }, dossierId: before.dossier.id };
}

/** Saves the claim's or the limit's section as submitted. */
export async function submitComparison(
	membership: Membership | null,
	id: string,
	form: FormData,
	db: Database = database()
): Promise<Submitted> {
	requireAction(membership, 'calculation.write');
	const before = await getCalculation(membership, id, db);
	const draft = readComparison(before.draft, methodOf(before.draft), form);
	const version = await saveDraft(
		membership,
		id,
		{ draft, baseVersion: baseVersion(form, before.version) },
		db
	);
	const answer = await answerOf(draft);
	return {
		draft,
		version,
		faults: ofPrefixes(answer?.faults ?? {}, ['claim.', 'limit.']),
		dossierId: before.dossier.id
	};
}

/** Saves the section "How to compute" as submitted. */
export async function submitEvaluation(
	membership: Membership | null,
	id: string,
	form: FormData,
	db: Database = database()
): Promise<Submitted> {
	requireAction(membership, 'calculation.write');
	const before = await getCalculation(membership, id, db);
	const draft = readEvaluation(before.draft, form);
	const version = await saveDraft(
		membership,
		id,
		{ draft, baseVersion: baseVersion(form, before.version) },
		db
	);
	const answer = await answerOf(draft);
	return {
		draft,
		version,
		faults: ofPrefixes(answer?.faults ?? {}, ['ev.', 'corr.']),
		dossierId: before.dossier.id
	};
}

const kinds: readonly QuestionKind[] = ['find-value', 'check-claim', 'test-limit'];

/** Saves title and kind of question. */
export async function submitQuestion(
	membership: Membership | null,
	id: string,
	form: FormData,
	db: Database = database()
): Promise<Submitted> {
	requireAction(membership, 'calculation.write');
	const before = await getCalculation(membership, id, db);
	const kind = kinds.find((known) => known === form.get('kind')) ?? before.draft.kind;
	const title = String(form.get('title') ?? before.title).trim();
	const method = before.draft.method === null ? undefined : methodById(before.draft.method);
	const draft = kind === before.draft.kind ? before.draft : chooseKind(before.draft, kind, method);
	const version = await saveDraft(
		membership,
		id,
		{ draft, baseVersion: baseVersion(form, before.version), ...(title === '' ? {} : { title }) },
		db
	);
	const faults: Record<string, string> =
		title === '' ? { title: 'Title: give it a name that you find again.' } : {};
	return { draft, version, faults, dossierId: before.dossier.id };
}

/** Saves the choice of method; what both methods ask for is kept. */
export async function submitMethod(
	membership: Membership | null,
	id: string,
	form: FormData,
	db: Database = database()
): Promise<Submitted> {
	requireAction(membership, 'calculation.write');
	const before = await getCalculation(membership, id, db);
	const method = methodById(String(form.get('method') ?? ''));
	if (method === undefined) {
		return {
			draft: before.draft,
			version: before.version,
			faults: { method: 'Choose a method.' },
			dossierId: before.dossier.id
		};
	}
	const draft = chooseMethod(before.draft, method);
	const version = await saveDraft(
		membership,
		id,
		{ draft, baseVersion: baseVersion(form, before.version) },
		db
	);
	return { draft, version, faults: {}, dossierId: before.dossier.id };
}
