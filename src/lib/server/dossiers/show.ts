import type { Listed } from '$lib/lists/query';
import { calculationList, reportList } from '$lib/lists/shapes';
import { requireAction, type Action } from '../access/can';
import type { Membership } from '../access/membership';
import { listCalculations, type CalculationRow } from '../calculations/list';
import { database, type Queryable } from '../db';
import { listEvidence, type EvidenceRow } from '../evidence/list';
import { listReports, type ReportRow } from '../reports/list';
import { findDossier, type Dossier } from './find';

export interface DossierPage {
	dossier: Dossier;
	calculations: Listed<CalculationRow>;
	reports: Listed<ReportRow>;
	evidence: EvidenceRow[];
}

/** A dossier with the first page of its calculations and reports, latest work first, and all its files. */
export async function showDossier(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<DossierPage> {
	requireAction(membership, 'dossier.read');
	const bare = { q: '', order: 'desc', page: 1, state: '' } as const;
	const dossier = await findDossier(db, membership, id);
	const [calculations, reports, evidence] = await Promise.all([
		listCalculations(membership, { ...bare, sort: calculationList.sort }, id, db),
		listReports(membership, { ...bare, sort: reportList.sort }, id, db),
		listEvidence(membership, id, db)
	]);
	return { dossier, calculations, reports, evidence };
}

/** The dossier alone. */
export async function openDossier(
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<Dossier> {
	requireAction(membership, 'dossier.read');
	return findDossier(db, membership, id);
}

/**
 * The dossier, for a page with a form that makes or changes something in it: whoever sees the dossier but may not do
 * that is told so before they fill it in.
 */
export async function openDossierTo(
	action: Action,
	membership: Membership | null,
	id: string,
	db: Queryable = database()
): Promise<Dossier> {
	const dossier = await openDossier(membership, id, db);
	requireAction(membership, action);
	return dossier;
}
