import canonicalize from 'canonicalize';
import type { ReportModel } from './model';

export const recordFormat = 'noonmark-record/1';
export const recordFileName = 'record.json';

/**
 * The computation records of a report as one JSON text in canonical form (RFC 8785), so that the same model gives
 * the same bytes wherever it was kept. `code` is null in a preview.
 */
export function recordAttachment(model: ReportModel): string {
	const text = canonicalize({
		format: recordFormat,
		report: {
			number: model.number,
			revision: model.revision,
			code: model.verification?.code ?? null
		},
		records: model.runs.map(({ request, result }) => ({ request, result }))
	});
	if (text === undefined) throw new Error('The record cannot be written as JSON.');
	return text;
}
