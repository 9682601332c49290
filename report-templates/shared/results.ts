/** Every output of the runs with what it averages: conventions side by side, not rival truths. */
import type { ReportModel, RunModel } from '$lib/report';
import { capitalise } from '$lib/wording';
import { sizes, type DocumentKit, type Node } from '$lib/server/reports/render/kit';
import { dataTable, numberCell, wordsCell } from './table';
import { documentWords as words } from './wording';

export function results(kit: DocumentKit, model: ReportModel): Node[] {
	return [
		kit.heading(words.results),
		...model.runs.flatMap((run) => [
			...(model.runs.length > 1 ? [kit.heading(run.title, { level: 3 })] : []),
			dataTable(
				kit,
				[
					{ title: words.resultsTable.quantity, width: 140 },
					{ title: words.resultsTable.average, width: 112 },
					{ title: words.resultsTable.estimate, width: 66, align: 'right' },
					{ title: words.resultsTable.uncertainty, width: 62, align: 'right' },
					{ title: words.resultsTable.interval(run.coverage), width: '*', align: 'right' }
				],
				run.outputs.map((output) => [
					wordsCell(kit, [
						...kit.runs(capitalise(output.name), { font: 'Noto Sans', fontSize: sizes.table }),
						...symbolAfter(kit, output.symbol)
					]),
					wordsCell(kit, output.average),
					numberCell(kit, output.estimate),
					numberCell(kit, output.uncertainty ?? words.noUncertainty),
					numberCell(kit, output.interval ?? words.noUncertainty)
				])
			),
			...reviewerFigures(kit, run)
		])
	];
}

/** Kept apart from the results: what a reviewer found by another route, and what may be said of the two. */
function reviewerFigures(kit: DocumentKit, run: RunModel): Node[] {
	// Reports frozen before reviewers could enter figures have no such list.
	const rows = run.reviewerFigures ?? [];
	if (rows.length === 0) return [];
	const sans = { font: 'Noto Sans', fontSize: sizes.table } as const;
	return [
		kit.heading(words.reviewerFigures, { level: 3 }),
		kit.paragraph(words.reviewerFiguresMark, { italics: true }),
		dataTable(
			kit,
			[
				{ title: words.reviewerFiguresTable.quantity, width: 88 },
				{ title: words.reviewerFiguresTable.figure, width: 78, align: 'right' },
				{ title: words.reviewerFiguresTable.averages, width: 92 },
				{ title: words.reviewerFiguresTable.route, width: '*' }
			],
			rows.map((row) => [
				wordsCell(kit, capitalise(row.quantity)),
				numberCell(kit, row.figure),
				wordsCell(kit, row.averages),
				wordsCell(kit, [...kit.runs(`${row.route} (${row.by})\n`, sans), ...kit.runs(row.comparison, sans)])
			])
		)
	];
}

/** A no-break space and the symbol, where a line can show it. */
export function symbolAfter(kit: DocumentKit, tex: string): Node[] {
	const runs = tex ? kit.symbol(tex, { fontSize: sizes.table }) : [];
	return runs.length > 0 ? [...kit.runs('\u00a0 ', { fontSize: sizes.table }), ...runs] : [];
}
