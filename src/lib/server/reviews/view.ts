import { methodById } from '$lib/methods';
import { unitsFor } from '$lib/quantities';
import { averagesOf, compareLines, reportLines, type ReportModel } from '$lib/report';
import { outputsOf } from '$lib/wording';
import { can, requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import { issueOf } from '../reports/issue';
import { getReport, type ReportView } from '../reports/load';
import { openDuties } from '../reports/open-duties';
import { coveredBy } from './approval';
import { commentsOf, takesRemarks } from './comments';
import { listFigures } from './own-figure';
import { handsIn } from './people';
import { ownWorkRefusal, selfApprovalAllowed } from './policy';
import { lastRecomputation } from './recompute';
import { roundsOf, roundViews, type Round } from './rounds';
import { calculationsOfRuns } from './run-calculations';
import { unansweredOf } from './state';
import type { CommentView, FigureTarget, ReviewLine, ReviewView } from './types';
import { stateWords } from './words';

/** The round that was last decided on: by this person if they ever did, else by anybody. */
function lastSeen(rounds: readonly Round[], userId: string): Round | undefined {
	const decided = rounds.filter(({ decidedAt }) => decidedAt !== null);
	return decided.find(({ decidedBy }) => decidedBy === userId) ?? decided[0];
}

/** For each run of now, the one that an earlier model had of the same calculation. */
async function runBefore(
	now: readonly string[],
	before: readonly string[],
	db: Queryable
): Promise<(id: string) => string | undefined> {
	const calculationOf = await calculationsOfRuns([...now, ...before], db);
	return (id) => {
		if (before.includes(id)) return id;
		return before.find(
			(earlier) => !now.includes(earlier) && calculationOf.get(earlier) === calculationOf.get(id)
		);
	};
}

function targets(model: ReportModel): FigureTarget[] {
	return model.runs.flatMap((run) => {
		const method = methodById(run.method.id);
		if (method === undefined) return [];
		const specs = outputsOf(method, run.result);
		return run.outputs.flatMap((output) => {
			const spec = specs.find(({ id }) => id === output.id);
			if (spec === undefined) return [];
			return [
				{
					runId: run.id,
					runTitle: run.title,
					output: output.id,
					name: output.name,
					estimate: output.estimate,
					averages: averagesOf(spec),
					units: [...new Set([...unitsFor(spec.quantity), spec.unit])]
				}
			];
		});
	});
}

/** Why the person at the page may not decide; null where they may. */
function refusal(
	membership: Membership,
	report: ReportView,
	own: boolean,
	selfApproval: boolean
): string | null {
	if (!can(membership, 'report.review')) return 'Your role here does not include reviewing.';
	if (report.state !== 'in-review') {
		return `The report is ${stateWords[report.state]}: a decision is taken while it is in review.`;
	}
	return own && !selfApproval ? ownWorkRefusal : null;
}

/** Everything that the review page shows. @throws InvalidInputError where the report has no result yet. */
export async function reviewView(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<ReviewView> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	const { model, digest } = await coveredBy(membership, report, db);
	const rounds = await roundsOf(report, db);
	const seen = lastSeen(rounds, membership.userId);
	const now = reportLines(model);
	const before = seen?.model as ReportModel | undefined;
	const compared = compareLines(
		now,
		before === undefined ? now : reportLines(before),
		await runBefore(
			model.runs.map(({ id }) => id),
			(before ?? model).runs.map(({ id }) => id),
			db
		)
	);
	const comments = await commentsOf(report, now, db);
	const of = (place: string): CommentView[] => comments.filter((comment) => comment.place === place);
	const lines = compared.lines.map((line): ReviewLine => ({ ...line, comments: of(line.place) }));
	const gone = compared.gone.map((line): ReviewLine => ({
		...line,
		changed: null,
		comments: of(line.place)
	}));
	gone.push(...strayed(comments, [...lines, ...gone]));

	const own = (await handsIn(report, db)).has(membership.userId);
	const selfApproval = await selfApprovalAllowed(membership.organisationId, db);
	const whyNot = refusal(membership, report, own, selfApproval);
	const issue = await issueOf(membership, report, db);
	const { id, number, revision, title, state, version, dossier } = report;
	return {
		report: {
			id,
			number,
			revision,
			title,
			state,
			version,
			dossierId: dossier.id,
			dossierTitle: dossier.title
		},
		digest,
		lines,
		gone,
		comparedWith: seen === undefined ? null : { round: seen.round, at: seen.decidedAt ?? seen.sentAt },
		rounds: await roundViews(report, rounds, db),
		figures: await listFigures(membership, id, db),
		figureTargets: targets(model),
		duties: openDuties(model).map(({ message }) => message),
		unanswered: await unansweredOf(report, rounds[0]?.round ?? 0, db),
		recomputed: await lastRecomputation(membership.userId, report, db),
		mayDecide: whyNot === null,
		whyNot,
		ownWork: own,
		mayComment: can(membership, 'report.comment') && takesRemarks(report, issue),
		mayEnterFigure: whyNot === null
	};
}

/** Lines that only remarks remember: each once, as it was quoted last. */
function strayed(comments: readonly CommentView[], known: readonly { place: string }[]): ReviewLine[] {
	const places = new Set(known.map(({ place }) => place));
	const left = comments.filter(({ place }) => !places.has(place));
	return [...new Set(left.map(({ place }) => place))].map((place) => {
		const remarks = left.filter((comment) => comment.place === place);
		return {
			place,
			section: 'No longer in the report',
			label: 'A line that was remarked on',
			text: remarks.at(-1)?.quoted ?? '',
			source: null,
			changed: null,
			comments: remarks
		};
	});
}
