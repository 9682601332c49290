import type { Queryable } from '../db';
import type { ReportView } from '../reports/load';
import { calculationsOfRuns } from './run-calculations';

const runIn = /^run:([0-9a-f-]{36})/;

/**
 * Where a remark stands now. A calculation that was computed anew has a run of another id; what was remarked on an
 * assumption of the earlier one belongs to the same assumption of the later.
 * @param places as they were stored
 * @returns the place in the report as it is; the same where nothing took its place
 */
export async function presentPlaces(
	report: Pick<ReportView, 'runIds'>,
	places: readonly string[],
	db: Queryable
): Promise<(place: string) => string> {
	const named = places.flatMap((place) => runIn.exec(place)?.[1] ?? []);
	const earlier = [...new Set(named)].filter((id) => !report.runIds.includes(id));
	if (earlier.length === 0) return (place) => place;
	const calculationOf = await calculationsOfRuns([...earlier, ...report.runIds], db);
	const successors = new Map(
		earlier.map((id) => {
			const same = report.runIds.filter((now) => calculationOf.get(now) === calculationOf.get(id));
			// Of two runs of one calculation nobody can say which took the place.
			return [id, same.length === 1 ? same[0] : undefined] as const;
		})
	);
	return (place) => place.replace(runIn, (_, id: string) => `run:${successors.get(id) ?? id}`);
}
