/** What every page carries: the noon line, the report's id with its revision, and the number of the page. */
import type { ReportModel } from '$lib/report';
import { colours, page, sizes, textWidth, type DocumentKit, type Node } from '$lib/server/reports/render/kit';
import { documentWords as words } from './wording';

/** "TB-0412, revision 2". */
export function reportId(model: ReportModel): string {
	return `${model.number}, ${words.revision(model.revision)}`;
}

export function footer(
	kit: DocumentKit,
	model: ReportModel,
	draft: boolean
): (n: number, of: number) => Node {
	const style = { font: 'Noto Sans', fontSize: sizes.small, color: colours.soft } as const;
	const parts = [
		reportId(model),
		draft || !model.verification ? words.draftMark : `code ${model.verification.code}`,
		words.inFull
	];
	const left = kit.runs(parts.join(' · '), style);
	return (n, of) => ({
		columns: [
			{ width: '*', text: left.map((run) => ({ ...run })) },
			{ width: 70, text: kit.runs(words.pageOf(n, of), style), alignment: 'right' }
		],
		margin: [page.left, 20, page.right, 0]
	});
}

/** The hairline beside the text column of every page. */
export function noonLine(): Node {
	return {
		canvas: [
			{
				type: 'line',
				x1: page.line,
				y1: page.top - 8,
				x2: page.line,
				y2: page.height - page.bottom + 12,
				lineWidth: 0.7,
				lineColor: colours.ink
			}
		]
	};
}

/** From the second page on, the title repeated above the text. */
export function header(kit: DocumentKit, model: ReportModel): (n: number) => Node | undefined {
	const style = { font: 'Noto Sans', fontSize: sizes.small, color: colours.soft } as const;
	const title = kit.runs(model.title, style);
	return (n) =>
		n === 1
			? undefined
			: {
					text: title.map((run) => ({ ...run })),
					margin: [page.left, 30, page.right, 0],
					width: textWidth,
					maxHeight: 12,
					noWrap: false
				};
}
