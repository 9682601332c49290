import { figureSpec, figureTable, type FigureColumn, type FigureOptions } from '$lib/figures';
import type { FigureRow } from '$lib/report/model';
import { drawForDownload, drawForPage, measureFigureText } from './draw';

export interface DrawnFigure {
	id: string;
	svg: string;
	/** The same for a narrow screen. */
	svgNarrow: string;
	finding: string;
	table: FigureColumn[];
}

function specOf(figure: FigureRow, size: Pick<FigureOptions, 'width' | 'height'>) {
	return figureSpec(figure.series, {
		...size,
		measure: measureFigureText,
		...(figure.yName === null ? {} : { yName: figure.yName }),
		...(figure.stated === null ? {} : { stated: figure.stated }),
		...(figure.assumed === null ? {} : { assumed: figure.assumed })
	});
}

/** A figure of a run for the page, with its table. */
export async function drawRow(figure: FigureRow): Promise<DrawnFigure> {
	const { id, finding, series } = figure;
	return {
		id,
		svg: await drawForPage(specOf(figure, { width: 620, height: 250 }), finding),
		svgNarrow: await drawForPage(specOf(figure, { width: 310, height: 210 }), finding),
		finding,
		table: figureTable(series)
	};
}

/** A figure of a run as an SVG file that stands on its own. */
export function drawRowForDownload(figure: FigureRow): Promise<string> {
	return drawForDownload(specOf(figure, { width: 720, height: 320 }), figure.finding);
}
