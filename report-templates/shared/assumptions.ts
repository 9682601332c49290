/** What went in: each number with its uncertainty, its source, and the share of the variance that it causes. */
import type { AssumptionRow, ReportModel, RunModel } from '$lib/report';
import { capitalise } from '$lib/wording';
import { sizes, type DocumentKit, type Node } from '$lib/server/reports/render/kit';
import { symbolAfter } from './results';
import { dataTable, numberCell, wordsCell } from './table';
import { documentWords as words } from './wording';

const sans = { font: 'Noto Sans', fontSize: sizes.table } as const;

function row(kit: DocumentKit, item: AssumptionRow): Node[] {
	return [
		wordsCell(kit, [...kit.runs(capitalise(item.name), sans), ...symbolAfter(kit, item.symbol)]),
		numberCell(kit, item.value, item.inOwnUnit ? [words.inOwnUnit(item.inOwnUnit)] : []),
		numberCell(
			kit,
			item.uncertainty ?? words.exact,
			item.uncertainty && item.distribution !== words.exact ? [item.distribution] : []
		),
		wordsCell(kit, kit.runs(item.source, sans), item.note ? [words.note(item.note)] : []),
		numberCell(kit, item.share ?? '')
	];
}

function table(kit: DocumentKit, run: RunModel): Node {
	return dataTable(
		kit,
		[
			{ title: words.assumptionsTable.quantity, width: 120 },
			{ title: words.assumptionsTable.value, width: 84, align: 'right' },
			{ title: words.assumptionsTable.uncertainty, width: 84, align: 'right' },
			{ title: words.assumptionsTable.source, width: 136 },
			{ title: words.assumptionsTable.share, width: '*', align: 'right' }
		],
		run.assumptions.map((item) => row(kit, item))
	);
}

export function assumptions(kit: DocumentKit, model: ReportModel): Node[] {
	return [
		kit.heading(words.assumptions),
		...model.runs.flatMap((run) => [
			...(model.runs.length > 1 ? [kit.heading(run.title, { level: 3 })] : []),
			table(kit, run)
		])
	];
}
