import { methodById } from '$lib/methods';
import type { ReportView, RunChoice } from './load';

/** Where a duty is put right: an address within the application. */
export function placeLink(
	place: string,
	report: Pick<ReportView, 'id' | 'dossier'>,
	runs: readonly RunChoice[]
): string {
	const here = `/reports/${report.id}`;
	if (place.startsWith('text.')) return `${here}#${place.slice('text.'.length)}`;
	if (place === 'report.title') return `${here}#title`;
	if (place === 'runs') return `${here}#runs`;
	if (place.startsWith('dossier.'))
		return `/dossiers/${report.dossier.id}/edit#${place.slice('dossier.'.length)}`;
	if (place.startsWith('organisation.')) return `/organisation#${place.slice('organisation.'.length)}`;
	const [, runId, part] = /^run:([0-9a-f-]+)(?:\/(.*))?$/.exec(place) ?? [];
	const run = runs.find(({ id }) => id === runId);
	if (run === undefined) return here;
	const base = `/calculations/${run.calculationId}`;
	if (part === 'claim' || part === 'limit') return `${base}/compare`;
	if (part?.startsWith('input:')) return inputLink(base, run.method, part.slice('input:'.length));
	return `${base}/result`;
}

function inputLink(base: string, methodId: string, inputId: string): string {
	const input = methodById(methodId)?.inputs.find(({ id }) => id === inputId);
	return input === undefined ? `${base}/check` : `${base}/inputs/${input.group}#in.${inputId}.source`;
}

/** What stands at a place, in words: "Bond albedo, Roof in summer". */
export function placeName(place: string, runs: readonly RunChoice[]): string {
	const [, runId, part] = /^run:([0-9a-f-]+)(?:\/(.*))?$/.exec(place) ?? [];
	if (runId === undefined) return place === 'runs' ? 'Results' : 'The report';
	const run = runs.find(({ id }) => id === runId);
	if (run === undefined) return 'A result that the report no longer shows';
	const method = methodById(run.method);
	const [kind, id] = part?.split(/:(.*)/) ?? [];
	const named =
		kind === 'input'
			? method?.inputs.find((input) => input.id === id)?.name
			: kind === 'output'
				? method?.outputs.find((output) => output.id === id)?.name
				: part;
	return named === undefined ? run.title : `${named.charAt(0).toUpperCase()}${named.slice(1)}, ${run.title}`;
}
