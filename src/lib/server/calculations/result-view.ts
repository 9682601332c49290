import { methodById } from '$lib/methods';
import type { Citation } from '$lib/methods/types';
import { buildRun } from '$lib/report/build';
import { SourceList } from '$lib/report/assumptions';
import type { RunModel } from '$lib/report/model';
import { wordingCitations } from '$lib/wording';
import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import { texToMathml } from '../equations/mathml';
import { listEvidence } from '../evidence/list';
import { drawRow, type DrawnFigure } from '../figures/of-row';
import type { CalculationView } from './load';
import type { RunView } from './runs';

export interface ResultEquation {
	id: string;
	title: string;
	/** MathML made here from the method's own TeX. */
	mathml: string;
	putMathml: string | null;
	citation: string;
}

/** A finished run as the result page shows it: worded and rounded as the report prints it. */
export interface ResultView {
	run: Omit<RunModel, 'request' | 'result' | 'figures' | 'equations'>;
	figures: DrawnFigure[];
	equations: ResultEquation[];
	references: Citation[];
	trials: number | null;
	seed: string | null;
}

/** The run's model with its figures, for the download of one figure. */
export async function runModel(
	membership: Membership,
	calculation: Pick<CalculationView, 'title' | 'dossier'>,
	run: RunView,
	db: Queryable = database()
): Promise<{ model: RunModel; references: Citation[] }> {
	const { result } = run;
	const method = result === null ? undefined : methodById(result.method.id);
	if (result === null || method === undefined) throw new Error('The run has no result to show.');
	const sources = new SourceList();
	const model = buildRun(
		{
			temperatureUnit: run.draft.temperatureUnit,
			evidence: await listEvidence(membership, calculation.dossier.id, db)
		},
		{
			id: run.id,
			title: calculation.title,
			draft: run.draft,
			request: run.request,
			result,
			engineVersion: run.engineVersion ?? '',
			nodeVersion: run.nodeVersion ?? '',
			computedAt: (run.finishedAt ?? run.createdAt).toISOString()
		},
		method,
		sources
	);
	return { model, references: [...method.citations, ...wordingCitations, ...sources.references] };
}

/** Words, drawings and equations of a finished run. */
export async function resultView(
	membership: Membership,
	calculation: CalculationView,
	run: RunView,
	db: Queryable = database()
): Promise<ResultView> {
	const { model, references } = await runModel(membership, calculation, run, db);
	const { request, result, figures, equations, ...rest } = model;
	return {
		run: rest,
		// One after the other: the drawing library numbers its parts in one count per process.
		figures: await figures.reduce<Promise<DrawnFigure[]>>(
			async (before, figure) => [...(await before), await drawRow(figure)],
			Promise.resolve([])
		),
		equations: equations.map(({ id, title, tex, put, citation }) => ({
			id,
			title,
			mathml: texToMathml(tex, true),
			putMathml: put === null ? null : texToMathml(put, true),
			citation
		})),
		references,
		trials: result.evaluation.trials ?? null,
		seed: result.evaluation.seed ?? request.evaluation?.seed ?? null
	};
}
