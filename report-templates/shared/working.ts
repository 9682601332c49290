/** The working as the trade writes it: each equation, the same with numbers and units put in, and its source. */
import type { EquationRow, FigureRow, ReportModel } from '$lib/report';
import type { DocumentKit, Node } from '$lib/server/reports/render/kit';
import { documentWords as words } from './wording';

async function equation(kit: DocumentKit, row: EquationRow): Promise<Node> {
	const label = kit.paragraph(
		kit.knows(row.citation)
			? [`${row.title} `, { cite: row.citation }, ':']
			: `${row.title} (${row.citation}):`,
		{},
		{ margin: [0, 4, 0, 1] }
	);
	return {
		stack: [
			label,
			await kit.equation(row.tex, row.spoken, { numbered: true }),
			...(row.put ? [await kit.equation(row.put, row.spoken)] : [])
		],
		unbreakable: true
	};
}

export async function working(kit: DocumentKit, model: ReportModel): Promise<Node[]> {
	const nodes: Node[] = [
		kit.heading(words.working),
		kit.paragraph(words.workingWith, {}, { keepWithNext: true })
	];
	const printed = new Set<string>();
	for (const run of model.runs) {
		const fresh = run.equations.filter((row) => !printed.has(`${row.tex}|${row.put ?? ''}`));
		if (fresh.length === 0) continue;
		if (model.runs.length > 1) nodes.push(kit.heading(run.title, { level: 3 }));
		for (const row of fresh) {
			printed.add(`${row.tex}|${row.put ?? ''}`);
			nodes.push(await equation(kit, row));
		}
	}
	return nodes;
}

/** Figures of all runs, at most `limit` of each; those that show the leading output come first. */
export async function figures(kit: DocumentKit, model: ReportModel, limit: number): Promise<Node[]> {
	const nodes: Node[] = [];
	for (const run of model.runs) {
		const shows = (row: FigureRow) => row.series.curves.some((curve) => curve.id === run.leading);
		const chosen = [...run.figures.filter(shows), ...run.figures.filter((row) => !shows(row))];
		for (const row of chosen.slice(0, limit)) {
			const banded = row.series.curves.some((curve) => curve.low);
			nodes.push(
				await kit.figure(row, {
					label: words.figureLabel,
					detail: banded ? words.figureBand : `${row.title}.`
				})
			);
		}
	}
	return nodes.length > 0 ? [kit.heading(words.figures), ...nodes] : [];
}
