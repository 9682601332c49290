import { seriesCsv } from '$lib/figures';
import { requireAction } from '../access/can';
import { NotFoundError } from '../access/errors';
import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import { drawRowForDownload } from '../figures/of-row';
import { getCalculation } from './load';
import { runModel } from './result-view';
import { getRun } from './runs';

/**
 * One figure of a finished run as a file that stands on its own.
 * @param file the figure's id with `.svg` or `.csv`
 * @throws NotFoundError for a figure that the run does not have.
 */
export async function figureFile(
	membership: Membership | null,
	calculationId: string,
	runId: string,
	file: string,
	db: Queryable = database()
): Promise<{ body: string; type: string; name: string }> {
	requireAction(membership, 'calculation.read');
	const calculation = await getCalculation(membership, calculationId, db);
	const run = await getRun(membership, runId, db);
	if (run.calculationId !== calculation.id || run.result === null) throw new NotFoundError('figure');
	const { model } = await runModel(membership, calculation, run, db);
	const [, id, extension] = /^(.*)\.(svg|csv)$/.exec(file) ?? [];
	const figure = model.figures.find((known) => known.id === id);
	if (figure === undefined) throw new NotFoundError('figure');
	if (extension === 'csv') {
		return { body: seriesCsv(figure.series), type: 'text/csv; charset=utf-8', name: `${figure.id}.csv` };
	}
	return {
		body: await drawRowForDownload(figure),
		type: 'image/svg+xml',
		name: `${figure.id}.svg`
	};
}
