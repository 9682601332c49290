import { randomBytes } from 'node:crypto';
import { newDraft } from '../../../calculation/new-draft';
import type { ComputeRequest } from '../../../calculation/types';
import { emptyReportText } from '../../../report/text';
import type { Database } from '../../db';
import { calculations, dossiers, evidence, issues, reports, runs } from '../../db/schema';
import { testOrganisation, testPerson } from '../../testing/people';

/** The body of the published black-body row, with a spread, so that trials are drawn. */
export const sampleRequest: ComputeRequest = {
	method: 'effective-temperature',
	inputs: {
		irradiance: { value: 1361 },
		bondAlbedo: { value: 0.3, distribution: { type: 'normal', standardUncertainty: 0.01 } }
	},
	evaluation: { propagation: 'monte-carlo', trials: 20_000, seed: 'a' }
};

async function one<Row>(inserting: Promise<Row[]>): Promise<Row> {
	const [row] = await inserting;
	if (row === undefined) throw new Error('The row was not inserted.');
	return row;
}

/** An organisation with a dossier, in which a calculation has a queued run and a report a queued issue. */
export async function sampleRows(db: Database, request: ComputeRequest = sampleRequest) {
	const { organisationId } = await testOrganisation(db, await testPerson(db));
	const dossier = await one(db.insert(dossiers).values({ organisationId, title: 'Roof' }).returning());
	const inDossier = { organisationId, dossierId: dossier.id };
	const draft = newDraft('find-value');
	const calculation = await one(
		db
			.insert(calculations)
			.values({ ...inDossier, title: 'Sheets', draft })
			.returning()
	);
	const run = await one(
		db
			.insert(runs)
			.values({ organisationId, calculationId: calculation.id, draft, request, state: 'queued' })
			.returning()
	);
	const report = await one(
		db
			.insert(reports)
			.values({
				...inDossier,
				number: `TB-${randomBytes(4).toString('hex')}`,
				template: 'client-memo',
				title: 'Memo',
				text: emptyReportText,
				runIds: [run.id]
			})
			.returning()
	);
	const file = await one(
		db
			.insert(evidence)
			.values({
				...inDossier,
				fileName: 'sheet.png',
				mediaType: 'image/png',
				size: 1,
				sha256: '0'.repeat(64),
				content: Buffer.from([0])
			})
			.returning()
	);
	const addIssue = () =>
		one(
			db
				.insert(issues)
				.values({
					organisationId,
					reportId: report.id,
					revision: 1,
					code: randomBytes(6).toString('hex'),
					model: {}
				})
				.returning()
		);
	return { organisationId, dossier, calculation, run, report, file, addIssue };
}
