import pg from 'pg';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { chooseMethod } from '$lib/calculation/new-draft';
import { readListQuery } from '$lib/lists/query';
import { calculationList, dossierList, reportList } from '$lib/lists/shapes';
import { methodById } from '$lib/methods';
import { emptyDossier } from '$lib/schemas/dossier';
import { createCalculation, deletedCalculationTitle, saveDraft } from '../calculations/change';
import { figureFile } from '../calculations/figure-file';
import { listCalculations } from '../calculations/list';
import { getCalculation, getVersion, listVersions } from '../calculations/load';
import { runModel } from '../calculations/result-view';
import { getRun, latestRun, runProgress, startRun } from '../calculations/runs';
import type { Database } from '../db';
import { calculations, dossiers, evidence, issues, previews, reports } from '../db/schema';
import { createDossier } from '../dossiers/create';
import { deletedDossierTitle } from '../dossiers/delete';
import { listDossiers } from '../dossiers/list';
import { openDossier, showDossier } from '../dossiers/show';
import { deletedEvidenceName } from '../evidence/delete';
import { downloadEvidence } from '../evidence/download';
import { listEvidence } from '../evidence/list';
import { uploadEvidence } from '../evidence/upload';
import { installQueues } from '../jobs/install';
import { createReport, deletedReportNumber } from '../reports/change';
import { issuedFile, issueOf } from '../reports/issue';
import { listReports } from '../reports/list';
import { getReport, runChoices, runsOf } from '../reports/load';
import { getPreview, previewFile, requestPreview } from '../reports/preview';
import { testDatabase } from '../testing/db';
import { setTestEnvironment } from '../testing/environment';
import { smallPdf } from '../testing/files';
import { member } from '../testing/members';
import { ForbiddenError, NotFoundError } from './errors';
import type { Membership } from './membership';

/* A guest of one dossier against the things of another one of the same organisation. */

interface Things {
	dossier: string;
	calculation: string;
	run: string;
	/** Name of a figure's file. */
	figure: string;
	file: string;
	report: string;
	preview: string;
	deleted: { dossier: string; calculation: string; file: string; report: string };
}

let db: Database;
let drop: () => Promise<void>;
let author: Membership;
let guest: Membership;
let own: Things;
let other: Things;

async function computedTile(dossier: string): Promise<{ calculation: string; run: string }> {
	const method = methodById('solar-reflectance-index');
	if (method === undefined) throw new Error('The method is gone.');
	const id = await createCalculation(author, dossier, { title: 'Tile', kind: 'find-value' }, db);
	const { draft, version } = await getCalculation(author, id, db);
	const filled = chooseMethod(draft, method);
	for (const [input, value] of Object.entries({ solarReflectance: '0.33', thermalEmittance: '0.90' })) {
		const before = filled.assumptions[input];
		if (before === undefined) throw new Error(`The method does not ask for ${input}.`);
		const source = { kind: 'citation', text: 'A table', evidenceId: null } as const;
		filled.assumptions[input] = { ...before, value, source };
	}
	await saveDraft(author, id, { draft: filled, baseVersion: version }, db);
	return { calculation: id, run: await startRun(author, id, db) };
}

function idOf(rows: { id: string }[]): string {
	const [row] = rows;
	if (row === undefined) throw new Error('The test database stored no row.');
	return row.id;
}

async function fill(title: string): Promise<Things> {
	const { organisationId } = author;
	const now = new Date();
	const dossier = await createDossier(author, { ...emptyDossier, title }, db);
	const { calculation, run } = await computedTile(dossier);
	const { id: file } = await uploadEvidence(
		author,
		dossier,
		{ name: `${title}.pdf`, bytes: smallPdf(title) },
		db
	);
	const report = await createReport(author, dossier, { template: 'client-memo', runId: run }, db);
	const pdf = Buffer.from(`%PDF of ${title}`);
	const model = { addressee: null, runs: [] };
	const preview = idOf(
		await db
			.insert(previews)
			.values({ organisationId, reportId: report, version: 1, state: 'done', model, pdf })
			.returning({ id: previews.id })
	);
	await db.insert(issues).values({
		organisationId,
		reportId: report,
		revision: 1,
		state: 'done',
		code: `${title.slice(0, 4)}-CODE`,
		model,
		pdf,
		issuedAt: now
	});
	const view = await getCalculation(author, calculation, db);
	const { draft } = view;
	const [figure] = (await runModel(author, view, await getRun(author, run, db), db)).model.figures;
	if (figure === undefined) throw new Error('The run has no figure.');
	return {
		dossier,
		calculation,
		run,
		figure: `${figure.id}.csv`,
		file,
		report,
		preview,
		deleted: {
			dossier: idOf(
				await db
					.insert(dossiers)
					.values({ organisationId, title: `${title}, deleted`, deletedAt: now })
					.returning({ id: dossiers.id })
			),
			calculation: idOf(
				await db
					.insert(calculations)
					.values({ organisationId, dossierId: dossier, title: 'Gone', draft, deletedAt: now })
					.returning({ id: calculations.id })
			),
			file: idOf(
				await db
					.insert(evidence)
					.values({
						organisationId,
						dossierId: dossier,
						fileName: 'gone.pdf',
						mediaType: 'application/pdf',
						size: 1,
						sha256: 'x',
						content: Buffer.from('x'),
						deletedAt: now
					})
					.returning({ id: evidence.id })
			),
			report: idOf(
				await db
					.insert(reports)
					.values({
						organisationId,
						dossierId: dossier,
						number: `${title.slice(0, 1)}-9999`,
						template: 'client-memo',
						title: 'Gone',
						text: (await getReport(author, report, db)).text,
						deletedAt: now
					})
					.returning({ id: reports.id })
			)
		}
	};
}

beforeAll(async () => {
	setTestEnvironment();
	let url: string;
	({ db, url, drop } = await testDatabase());
	const pool = new pg.Pool({ connectionString: url, max: 2 });
	await installQueues(pool);
	await pool.end();
	author = await member(db, ['owner', 'author']);
	own = await fill('Alpha roofs');
	other = await fill('Omega yards');
	guest = {
		...(await member(db, ['reader'])),
		organisationId: author.organisationId,
		organisationName: author.organisationName,
		roles: ['guest'],
		onlyDossiers: [own.dossier]
	};
});
afterAll(() => drop());

/** Every use case that reads one thing of a dossier, by the things that it is asked for. */
const readings: Readonly<Record<string, (who: Membership, things: Things) => Promise<unknown>>> = {
	openDossier: (who, { dossier }) => openDossier(who, dossier, db),
	showDossier: (who, { dossier }) => showDossier(who, dossier, db),
	getCalculation: (who, { calculation }) => getCalculation(who, calculation, db),
	listVersions: (who, { calculation }) => listVersions(who, calculation, db),
	getVersion: (who, { calculation }) => getVersion(who, calculation, 2, db),
	getRun: (who, { run }) => getRun(who, run, db),
	runProgress: (who, { run }) => runProgress(who, run, db),
	figureFile: (who, { calculation, run, figure }) => figureFile(who, calculation, run, figure, db),
	downloadEvidence: (who, { file }) => downloadEvidence(who, file, db),
	getReport: (who, { report }) => getReport(who, report, db),
	runsOf: (who, { run, dossier }) => runsOf(who, [run], dossier, db),
	issuedFile: (who, { report }) => issuedFile(who, report, db),
	requestPreview: (who, { report }) => requestPreview(who, report, db),
	getPreview: (who, { preview }) => getPreview(who, preview, db),
	previewFile: (who, { preview }) => previewFile(who, preview, db)
};

/** Those that answer with nothing instead of an error, and what a member gets. */
const lookups: Readonly<Record<string, (who: Membership, things: Things) => Promise<unknown>>> = {
	latestRun: (who, { calculation }) => latestRun(who, calculation, db),
	issueOf: (who, { report }) => issueOf(who, { id: report, revision: 1 }, db),
	listEvidence: async (who, { dossier }) => (await listEvidence(who, dossier, db)).length,
	runChoices: async (who, { dossier }) => (await runChoices(who, dossier, [], db)).length,
	listCalculations: async (who, { dossier }) =>
		(await listCalculations(who, readListQuery(new URLSearchParams(), calculationList), dossier, db)).total,
	listReports: async (who, { dossier }) =>
		(await listReports(who, readListQuery(new URLSearchParams(), reportList), dossier, db)).total,
	deletedCalculationTitle: (who, { deleted }) => deletedCalculationTitle(who, deleted.calculation, db),
	deletedEvidenceName: (who, { deleted }) => deletedEvidenceName(who, deleted.file, db),
	deletedReportNumber: (who, { deleted }) => deletedReportNumber(who, deleted.report, db)
};

describe('a guest of one dossier', () => {
	it.each(Object.entries(readings))(
		'%s: reads their own, and the other does not exist',
		async (name, read) => {
			// A figure's file may have another name; that it is asked for at all is what counts here.
			if (name !== 'figureFile') {
				await expect(read(guest, own)).resolves.toBeDefined();
				await expect(read(author, other)).resolves.toBeDefined();
			}
			await expect(read(guest, other)).rejects.toThrow(NotFoundError);
		}
	);

	it.each(Object.entries(lookups))('%s: finds their own, and nothing of the other', async (_, look) => {
		expect(await look(guest, own)).toBeTruthy();
		expect(await look(author, other)).toBeTruthy();
		expect(Boolean(await look(guest, other))).toBe(false);
	});

	it('lists their dossier, its calculations and its reports alone, in rows and in counts', async () => {
		const [theirDossiers, theirCalculations, theirReports] = await Promise.all([
			listDossiers(guest, readListQuery(new URLSearchParams(), dossierList), db),
			listCalculations(guest, readListQuery(new URLSearchParams(), calculationList), undefined, db),
			listReports(guest, readListQuery(new URLSearchParams(), reportList), undefined, db)
		]);
		expect(theirDossiers).toMatchObject({ total: 1, matching: 1, rows: [{ id: own.dossier }] });
		expect(theirCalculations).toMatchObject({ total: 1, matching: 1, rows: [{ id: own.calculation }] });
		expect(theirReports).toMatchObject({ total: 1, matching: 1, rows: [{ id: own.report }] });
		const searched = await listDossiers(
			guest,
			readListQuery(new URLSearchParams('q=Omega'), dossierList),
			db
		);
		expect(searched).toMatchObject({ matching: 0, rows: [] });
		const all = await listDossiers(author, readListQuery(new URLSearchParams(), dossierList), db);
		expect(all.total).toBe(2);
	});

	it('takes a run, a file or a figure of the other dossier by no mix of ids', async () => {
		await expect(figureFile(guest, own.calculation, other.run, other.figure, db)).rejects.toThrow(
			NotFoundError
		);
		await expect(runsOf(guest, [other.run], other.dossier, db)).rejects.toThrow(NotFoundError);
		await expect(runsOf(guest, [other.run], own.dossier, db)).rejects.toThrow(NotFoundError);
	});

	it('learns nothing of deleted dossiers', async () => {
		expect(await deletedDossierTitle(author, other.deleted.dossier, db)).toBe('Omega yards, deleted');
		expect(await deletedDossierTitle(guest, other.deleted.dossier, db)).toBeUndefined();
	});

	it('writes nothing, in their own dossier either', async () => {
		await expect(
			createCalculation(guest, own.dossier, { title: 'x', kind: 'find-value' }, db)
		).rejects.toThrow(ForbiddenError);
		await expect(uploadEvidence(guest, own.dossier, { name: 'x', bytes: smallPdf() }, db)).rejects.toThrow(
			ForbiddenError
		);
		await expect(
			createReport(guest, own.dossier, { template: 'client-memo', runId: null }, db)
		).rejects.toThrow(ForbiddenError);
	});

	it('who was let into no dossier that is left sees nothing', async () => {
		const nowhere: Membership = { ...guest, onlyDossiers: [] };
		await expect(openDossier(nowhere, own.dossier, db)).rejects.toThrow(NotFoundError);
		const listed = await listReports(
			nowhere,
			readListQuery(new URLSearchParams(), reportList),
			undefined,
			db
		);
		expect(listed).toMatchObject({ total: 0, rows: [] });
	});
});
