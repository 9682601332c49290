import { and, asc, eq, inArray, isNull } from 'drizzle-orm';
import { methodById } from '$lib/methods';
import { loadUnits } from '$lib/quantities';
import {
	buildReportModel,
	type ReportModel,
	type ReportSource,
	type ReportState,
	type ReviewerFigureSource,
	type ReviewSource,
	type VerificationSource
} from '$lib/report';
import { InvalidInputError } from '../access/errors';
import type { Membership } from '../access/membership';
import { inReach } from '../access/reach';
import type { Queryable } from '../db';
import { evidence, organisations, reviewerFigures, users } from '../db/schema';
import { runsOf, type ReportView } from './load';
import { unprintableText } from './render/printable';

export interface Circumstances {
	/** Null in a preview: nothing can be verified yet. */
	verification: VerificationSource | null;
	issueDate: Date | null;
	/** Who authorised the issue. */
	authoriser: { name: string; role?: string } | null;
	state: ReportState;
	review: ReviewSource;
}

/** Nothing but the report itself: what an author owes a reader, and what an approval covers, is found out with these. */
export const unissued: Circumstances = {
	verification: null,
	issueDate: null,
	authoriser: null,
	state: 'draft',
	review: { kind: 'not-reviewed' }
};

/** Evidence that the runs name, also where it was put away since: what an issued figure stands on stays listed. */
async function evidenceOf(membership: Membership, ids: readonly string[], db: Queryable) {
	if (ids.length === 0) return [];
	return db
		.select({
			id: evidence.id,
			fileName: evidence.fileName,
			mediaType: evidence.mediaType,
			size: evidence.size,
			sha256: evidence.sha256
		})
		.from(evidence)
		.where(
			and(
				inArray(evidence.id, [...ids]),
				eq(evidence.organisationId, membership.organisationId),
				inReach(membership, evidence.dossierId)
			)
		)
		.orderBy(evidence.uploadedAt);
}

/** Reviewers' own figures of this revision that were not taken back. */
async function figuresOf(report: ReportView, db: Queryable): Promise<ReviewerFigureSource[]> {
	const rows = await db
		.select({ figure: reviewerFigures, name: users.name })
		.from(reviewerFigures)
		.leftJoin(users, eq(users.id, reviewerFigures.enteredBy))
		.where(
			and(
				eq(reviewerFigures.reportId, report.id),
				eq(reviewerFigures.revision, report.revision),
				isNull(reviewerFigures.withdrawnAt)
			)
		)
		.orderBy(asc(reviewerFigures.enteredAt), asc(reviewerFigures.id));
	await loadUnits(rows.map(({ figure }) => figure.unit));
	return rows.map(({ figure, name }) => {
		const { runId, output, kind, value, unit, giveOrTake, averages, route } = figure;
		const by = { name: name ?? 'a former reviewer' };
		return { runId, output, kind, value, unit, giveOrTake, averages, route, by };
	});
}

/**
 * The report as it would be printed now.
 * @throws InvalidInputError where it reports no run.
 */
export async function modelOf(
	membership: Membership,
	report: ReportView,
	circumstances: Circumstances,
	db: Queryable
): Promise<ReportModel> {
	const loaded = await runsOf(membership, report.runIds, report.dossier.id, db);
	if (loaded.length === 0) {
		throw new InvalidInputError('A report needs a result.', {
			runs: 'Choose at least one result to report.'
		});
	}
	const [organisation] = await db
		.select()
		.from(organisations)
		.where(eq(organisations.id, membership.organisationId));
	const [author] =
		report.createdBy === null
			? []
			: await db.select({ name: users.name }).from(users).where(eq(users.id, report.createdBy));
	if (organisation === undefined) throw new Error('The organisation is gone.');
	const named = loaded.flatMap(({ run }) =>
		Object.values(run.draft.assumptions).flatMap(({ source }) => source.evidenceId ?? [])
	);
	const { dossier } = report;
	const inputDates = loaded.map(({ run }) => run.createdAt.getTime());
	const source: ReportSource = {
		template: report.template,
		language: 'en-GB',
		organisation: {
			name: organisation.name,
			address: organisation.address,
			registrationLine: organisation.registrationLine
		},
		report: {
			number: report.number,
			revision: report.revision,
			state: circumstances.state,
			title: report.title,
			text: report.text
		},
		addressee:
			dossier.client.trim() !== ''
				? { name: dossier.client, contact: dossier.clientContact }
				: report.text.withoutAddressee
					? 'none'
					: null,
		scope: dossier.scope,
		reliance: dossier.reliance,
		projectNumber: dossier.projectNumber,
		orderNumber: dossier.orderNumber,
		author: { name: author?.name ?? 'a former member' },
		authoriser: circumstances.authoriser,
		dates: {
			inputData: new Date(Math.max(...inputDates)).toISOString(),
			issue: circumstances.issueDate?.toISOString() ?? null
		},
		verification: circumstances.verification,
		runs: loaded.map(({ run, title }) => {
			if (run.result === null) throw new Error('A finished run has no result.');
			return {
				id: run.id,
				title,
				draft: run.draft,
				request: run.request,
				result: run.result,
				engineVersion: run.engineVersion ?? '',
				nodeVersion: run.nodeVersion ?? '',
				computedAt: (run.finishedAt ?? run.createdAt).toISOString()
			};
		}),
		evidence: await evidenceOf(membership, named, db),
		review: circumstances.review,
		reviewerFigures: await figuresOf(report, db),
		history: [
			{
				revision: report.revision,
				issuedAt: circumstances.issueDate?.toISOString() ?? null,
				reason: ''
			}
		]
	};
	return buildReportModel(source, { methodOf: methodById });
}

/**
 * Refuses what the document's typefaces cannot print, while the author is still there to mend it.
 * @throws InvalidInputError that names the character
 */
export function requirePrintable(model: ReportModel): void {
	const fault = unprintableText(model);
	if (fault !== null) throw new InvalidInputError(fault.message, { form: fault.message });
}
