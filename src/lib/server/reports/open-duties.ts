import { engineVersion } from '$lib/record';
import { unmetDuties, type Duty, type ReportModel } from '$lib/report';

/** The report's own duties, and that every figure is one that this version of the code computes. */
export function openDuties(model: ReportModel): Duty[] {
	const outdated = model.runs
		.filter((run) => run.engineVersion !== engineVersion)
		.map((run) => ({
			code: 'outdated-run',
			message: `“${run.title}” was computed by version ${run.engineVersion} of the computing code, and this is ${engineVersion}: compute it again.`,
			place: `run:${run.id}`
		}));
	return [...unmetDuties(model), ...outdated];
}
