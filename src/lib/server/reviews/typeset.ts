import { requireAction } from '../access/can';
import type { Membership } from '../access/membership';
import { database, type Queryable } from '../db';
import { texToMathml } from '../equations/mathml';
import { getReport } from '../reports/load';
import { modelOf, unissued } from '../reports/model';

/** An equation as mathematics. */
export interface TypesetEquation {
	mathml: string;
	/** The same with the numbers and units put in. */
	putMathml: string | null;
}

/**
 * The equations of a report that is not issued yet, by the place of their line.
 * @throws InvalidInputError where the report has no result yet
 */
export async function typesetEquations(
	membership: Membership | null,
	reportId: string,
	db: Queryable = database()
): Promise<Record<string, TypesetEquation>> {
	requireAction(membership, 'report.read');
	const report = await getReport(membership, reportId, db);
	const model = await modelOf(membership, report, unissued, db);
	return Object.fromEntries(
		model.runs.flatMap((run) =>
			run.equations.map(({ id, tex, put }) => [
				`run:${run.id}/equation:${id}`,
				{ mathml: texToMathml(tex, true), putMathml: put === null ? null : texToMathml(put, true) }
			])
		)
	);
}
