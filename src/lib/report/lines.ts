/** A report as a list of lines, as a reviewer reads it: each has a place that a remark can name. */
import type { Citation } from '../methods/types';
import { plainText, type Phrase } from '../wording';
import { instantText } from './dates';
import type { AssumptionRow, ReportModel, RunModel } from './model';
import { personText } from './reviewer-figure';

export interface ReportLine {
	/** As duties name places: `report.title`, `text.answer`, `dossier.client`, `run:ID/input:ID`, `run:ID/output:ID`. */
	place: string;
	/** Heading that it stands under. */
	section: string;
	label: string;
	/** Empty where nothing was written. */
	text: string;
	/** Of an assumption: how it is spread, where it comes from, its note. */
	source: string | null;
}

/** A phrase with the works that it cites written out. */
function cited(phrase: Phrase, references: readonly Citation[]): string {
	return phrase
		.map((part) => {
			if (typeof part === 'string') return part;
			if ('strong' in part) return part.strong;
			return references.find(({ id }) => id === part.cite)?.text ?? part.cite;
		})
		.join('')
		.trim();
}

const sentences = (parts: readonly (string | null)[]): string =>
	parts
		.map((part) => part?.trim() ?? '')
		.filter(Boolean)
		.join('\n');

const capital = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

function assumptionLine(run: RunModel, row: AssumptionRow, references: readonly Citation[]): ReportLine {
	const source = [
		row.uncertainty ? `Standard uncertainty ${row.uncertainty}, ${row.distribution}` : row.distribution,
		// What a page shows as a number in brackets stands here in full.
		cited(row.source, references).replace(/^(published|method’s default) (?=\S)/, '$1: '),
		row.note && `Note: ${row.note}`
	];
	return {
		place: `run:${run.id}/input:${row.id}`,
		section: run.title,
		label: row.name,
		text: row.inOwnUnit ? `${row.value} (that is ${row.inOwnUnit})` : row.value,
		source: source.filter(Boolean).map(capital).join('. ')
	};
}

function runLines(run: RunModel, references: readonly Citation[]): ReportLine[] {
	const at = `run:${run.id}`;
	const line = (part: string, label: string, text: string): ReportLine => ({
		place: part === '' ? at : `${at}/${part}`,
		section: run.title,
		label,
		text,
		source: null
	});
	const optional = (part: string, label: string, text: string): ReportLine[] =>
		text === '' ? [] : [line(part, label, text)];
	const { finding } = run;
	return [
		line(
			'',
			'Calculation',
			sentences([
				run.title,
				`${run.method.title}, version ${run.method.version}; computing code ${run.engineVersion}; computed ${instantText(run.computedAt)}`,
				`Record ${run.record}`
			])
		),
		line('headline', 'Result in words', sentences([plainText(run.headline), run.averages, run.aside])),
		...(finding
			? [
					line(
						finding.kind,
						finding.kind === 'claim' ? 'Finding on the claim' : 'Finding on the limit',
						sentences([
							finding.heading,
							plainText(finding.reasons),
							finding.quotation && `“${finding.quotation}”`,
							finding.citation
						])
					)
				]
			: []),
		...run.outputs.map((output) =>
			line(
				`output:${output.id}`,
				output.label,
				sentences([
					[
						output.estimate,
						output.uncertainty && `standard uncertainty ${output.uncertainty}`,
						output.interval && `${run.coverage ?? ''} coverage interval ${output.interval}`.trim()
					]
						.filter(Boolean)
						.join('; '),
					`Averages ${output.average}.`
				])
			)
		),
		...run.assumptions.map((row) => assumptionLine(run, row, references)),
		line(
			'deviations',
			'Departures from the method’s defaults',
			run.deviations.length > 0 ? run.deviations.join('\n') : 'None.'
		),
		...run.equations.map((row) => line(`equation:${row.id}`, `Equation: ${row.title}`, row.spoken)),
		...run.figures.map((row) => line(`figure:${row.id}`, `Figure: ${row.title}`, row.finding)),
		...optional('drivers', 'What causes the uncertainty', run.drivers),
		...optional('notes', 'How the uncertainty was worked out', run.notes.map(plainText).join('\n')),
		...run.cautions.map((row) =>
			line(
				`caution:${row.code}`,
				row.lead,
				sentences([
					row.text,
					row.source && `After: ${cited(row.cite ? [{ cite: row.cite }] : [row.source], references)}`
				])
			)
		),
		...optional('left-out', 'What the method leaves out', run.method.leavesOut.join('\n'))
	];
}

/** Every line of the report in the order of the document. Places are unique. */
export function reportLines(model: ReportModel): ReportLine[] {
	const line = (place: string, section: string, label: string, text: string): ReportLine => ({
		place,
		section,
		label,
		text: text.trim(),
		source: null
	});
	const heading = 'Title block';
	const answer = 'Question and answer';
	const closing = 'Scope, opinion and what was left out';
	const { organisation, text } = model;
	return distinct([
		line('report.title', heading, 'Title', model.title),
		line(
			'dossier.client',
			heading,
			'Addressee',
			model.addressee
				? sentences([model.addressee.name, model.addressee.contact])
				: model.withoutAddressee
					? 'To no particular addressee'
					: ''
		),
		line('dossier.projectNumber', heading, 'Project number', model.projectNumber),
		line('dossier.orderNumber', heading, 'Order number', model.orderNumber),
		line('text.commissionedBy', heading, 'Commissioned or funded by', text.commissionedBy),
		line(
			'organisation.name',
			heading,
			'Letterhead',
			sentences([organisation.name, ...organisation.address, organisation.registrationLine])
		),
		line('report.author', heading, 'Author', personText(model.author)),
		line('text.question', answer, 'Question', text.question),
		line('text.background', answer, 'Background', text.background),
		line('text.answer', answer, 'Answer', text.answer),
		line('report.computed', answer, 'Answer as computed', model.composedAnswer),
		...model.runs.flatMap((run) => runLines(run, model.references)),
		line('text.leftOut', closing, 'Left out, in the author’s words', text.leftOut),
		line('text.commentary', closing, 'Opinion of the author', text.commentary),
		line('dossier.scope', closing, 'Scope', model.scope),
		line('dossier.reliance', closing, 'Who may rely on it', model.reliance),
		...model.evidence.map((file) =>
			line(
				`evidence:${file.id}`,
				'Evidence files',
				file.fileName,
				`${file.size} bytes, SHA-256 ${file.sha256}`
			)
		)
	]);
}

/** A caution may be raised twice in a run: the second and later ones get a number behind their place. */
function distinct(lines: readonly ReportLine[]): ReportLine[] {
	const seen = new Map<string, number>();
	return lines.map((line) => {
		const count = (seen.get(line.place) ?? 0) + 1;
		seen.set(line.place, count);
		return count === 1 ? line : { ...line, place: `${line.place}~${count}` };
	});
}

export interface ComparedLine extends ReportLine {
	/** Null where the line reads as before; `before` is empty for a line that is new. */
	changed: { before: string } | null;
}

/** A line as it is quoted: with where it came from. */
export const wholeLine = (line: Pick<ReportLine, 'text' | 'source'>): string =>
	[line.text, line.source].filter(Boolean).join('\n');

/**
 * The present lines beside earlier ones.
 * @param runBefore id of the run that stood for the same calculation earlier, for a run of now
 * @returns the lines of now, and the earlier ones that are gone
 */
export function compareLines(
	now: readonly ReportLine[],
	before: readonly ReportLine[],
	runBefore: (runId: string) => string | undefined = (id) => id
): { lines: ComparedLine[]; gone: ReportLine[] } {
	const left = new Map(before.map((line) => [line.place, line]));
	const lines = now.map((line) => {
		const place = line.place.replace(/^run:([^/]+)/, (whole, id: string) => {
			const earlier = runBefore(id);
			return earlier === undefined ? whole : `run:${earlier}`;
		});
		const earlier = left.get(place);
		left.delete(place);
		const text = earlier === undefined ? '' : wholeLine(earlier);
		const same = earlier !== undefined && text === wholeLine(line);
		return { ...line, changed: same ? null : { before: text } };
	});
	return { lines, gone: [...left.values()] };
}

/** What differs between two models, in words for a sentence: "the addressee", "the title"; empty where no line does. */
export function changedPlaces(now: ReportModel, before: ReportModel): string[] {
	const { lines, gone } = compareLines(reportLines(now), reportLines(before));
	const own = ({ place, label, section }: ReportLine): string => {
		if (/^(run|evidence):/.test(place)) return `“${label}” of “${section}”`;
		const inside = `${label.charAt(0).toLowerCase()}${label.slice(1)}`;
		// "Who may rely on it" is a clause, no thing.
		return inside.startsWith('who ') ? inside : `the ${inside}`;
	};
	return [...lines.filter((line) => line.changed !== null), ...gone].map(own);
}
