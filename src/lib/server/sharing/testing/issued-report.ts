import { createHash, randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { compute } from '$lib/calculation/compute';
import type { ComputeRequest } from '$lib/calculation/types';
import { methodById } from '$lib/methods';
import { buildReportModel, type ReportModel } from '$lib/report';
import { samples } from '../../../../../report-templates/client-memo/sample';
import type { Membership } from '../../access/membership';
import type { Database } from '../../db';
import { dossiers, issues, reports } from '../../db/schema';
import { reportIssuing } from '../../reports/issuing';
import { ensureOrganisationCertificate } from '../../signing/authority';

export interface IssuedReport {
	dossierId: string;
	reportId: string;
	issueId: string;
	pdf: Buffer;
	model: ReportModel;
}

/**
 * The frozen model of a sample memo, as of now: a certificate made in the test is no older.
 * @param trials of each calculation, if not those of the sample
 */
export async function sampleModel(
	number: string,
	revision: number,
	name = 'value',
	trials?: number
): Promise<ReportModel> {
	const sample = samples[name];
	if (sample === undefined) throw new Error(`There is no sample “${name}”.`);
	const asked = (request: ComputeRequest): ComputeRequest =>
		trials === undefined
			? request
			: { ...request, evaluation: { ...request.evaluation, propagation: 'monte-carlo', trials } };
	const source = await sample({ compute: (request) => compute(asked(request)), methodOf: methodById });
	for (const run of source.runs) run.request = asked(run.request);
	const now = new Date().toISOString();
	return buildReportModel(
		{
			...source,
			report: { ...source.report, number, revision, state: 'issued' },
			dates: { ...source.dates, issue: now },
			verification: {
				address: 'https://noonmark.example/verify',
				// Codes are unique; this one is of no report that a person holds.
				code: `${randomUUID().slice(0, 4)}-${randomUUID().slice(0, 4)}`.toUpperCase().replace(/[01]/g, 'X'),
				rootFingerprint: 'f'.repeat(64)
			},
			history: [{ revision, issuedAt: now, reason: revision === 1 ? '' : 'A slip in the inputs.' }]
		},
		{ methodOf: methodById }
	);
}

/** A sample memo, signed by the test's own authority and kept as an issued report of the member's organisation. */
export async function issuedReport(
	db: Database,
	owner: Membership,
	given: { number?: string; revision?: number; dossierId?: string; model?: ReportModel } = {}
): Promise<IssuedReport> {
	const { number = `TB-${randomUUID().slice(0, 4)}`, revision = 1 } = given;
	const model = given.model ?? (await sampleModel(number, revision));
	let { dossierId } = given;
	if (dossierId === undefined) {
		const [dossier] = await db
			.insert(dossiers)
			.values({ organisationId: owner.organisationId, title: 'A dossier' })
			.returning({ id: dossiers.id });
		dossierId = dossier?.id ?? '';
	}
	const [report] = await db
		.insert(reports)
		.values({
			organisationId: owner.organisationId,
			dossierId,
			number,
			revision,
			template: model.template,
			title: model.title,
			text: model.text,
			state: 'issued',
			createdBy: owner.userId
		})
		.returning({ id: reports.id });
	const reportId = report?.id ?? '';
	await ensureOrganisationCertificate(db, owner.organisationId);
	const draft = {
		organisationId: owner.organisationId,
		reportId,
		revision,
		code: model.verification?.code ?? '',
		model,
		requestedBy: owner.userId
	};
	const [asked] = await db.insert(issues).values(draft).returning();
	if (asked === undefined) throw new Error('The test database stored no issue.');
	const rendered = await reportIssuing.render(asked, db, new AbortController().signal);
	const signed = await reportIssuing.sign(asked, rendered, db);
	const pdf = Buffer.from(signed.pdf);
	const sha256 = createHash('sha256').update(pdf).digest('hex');
	await db
		.update(issues)
		.set({
			state: 'done',
			pdf,
			sha256,
			size: pdf.length,
			certificateId: signed.certificateId,
			issuedAt: signed.issuedAt
		})
		.where(eq(issues.id, asked.id));
	return { dossierId, reportId, issueId: asked.id, pdf, model };
}
