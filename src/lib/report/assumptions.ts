/** The table of assumptions: every number that went in, as typed, with where it came from and what it does. */
import type { AssumptionDraft } from '../calculation/draft';
import type { InputUsed, TableCell, TableRow } from '../calculation/types';
import type { Citation, Method, NumberInput } from '../methods/types';
import { attachUnit, convertDifference, formatNumber, formatSignificant } from '../quantities';
import { parseNumber } from '../quantities/parse-number';
import {
	britishEnglish,
	cite,
	differenceUnit,
	distributionText,
	isTemperatureUnit,
	share,
	type Phrase
} from '../wording';
import type { AssumptionRow, Provenance } from './model';
import type { EvidenceSource, RunSource } from './source';

/** Collects what assumptions cite, each text once. */
export class SourceList {
	readonly references: Citation[] = [];

	/** Id under which a text may be cited. */
	add(text: string, extra: Pick<Citation, 'doi' | 'url'> = {}): string {
		const clean = text.trim();
		const found = this.references.find((reference) => reference.text === clean);
		if (found) return found.id;
		const id = `source-${this.references.length + 1}`;
		this.references.push({ id, text: clean, ...extra });
		return id;
	}
}

interface Context {
	method: Method;
	run: RunSource;
	evidence: readonly EvidenceSource[];
	sources: SourceList;
	/** The output whose variance the shares are of. */
	leading: string;
}

/** Unit of a difference in a unit: degC is told in K. */
export function unitOfDifference(unit: string): string {
	return isTemperatureUnit(unit) ? differenceUnit(unit) : unit;
}

/** The number as typed, with a real minus sign; what was typed says how many digits are meant. */
export function typedNumber(text: string, value: number): string {
	const parsed = parseNumber(text);
	const decimals = /^[+\-−]?\d+([.,](\d+))?$/.exec(text.trim())?.[2]?.length ?? 0;
	const plain = /^[+\-−]?\d+([.,]\d+)?$/.test(text.trim());
	return parsed.ok && plain ? formatNumber(parsed.value, decimals) : formatSignificant(value, 10);
}

function provenanceOf(draft: AssumptionDraft | undefined, used: InputUsed): Provenance {
	if (!used.given) return 'default';
	const kind = draft?.source.kind ?? null;
	return kind === null || kind === 'not-sure' ? 'not-stated' : kind;
}

/** Where a default comes from: a work that the method cites, or words. */
function defaultSource(context: Context, source: string | undefined): Phrase {
	if (!source) return ['method’s default'];
	const known = context.method.citations.find(({ id, text }) => id === source || text === source);
	return known ? ['method’s default ', cite(known.id)] : [`method’s default: ${source.replace(/\.$/, '')}`];
}

function fileSource(context: Context, draft: AssumptionDraft): Phrase {
	const file = context.evidence.find((item) => item.id === draft.source.evidenceId);
	const place = draft.source.text.trim();
	if (!file) return [place ? `file, ${place}` : 'file'];
	const id = context.sources.add(
		`File “${file.fileName}” held by the author, ${file.size} bytes, SHA-256 ${file.sha256}.`
	);
	return [`file${place ? `, ${place}` : ''} `, cite(id)];
}

const valueKinds = {
	new: 'value when new',
	aged: 'value after ageing',
	'not-stated': 'new or aged not stated'
};
const spreadKinds = {
	'standard-uncertainty': 'its spread is a standard uncertainty',
	tolerance: 'its spread is a tolerance',
	'not-stated': 'kind of spread not stated'
};

function sourcePhrase(context: Context, draft: AssumptionDraft | undefined, used: InputUsed): Phrase {
	if (!used.given) return defaultSource(context, used.source);
	if (!draft) return ['not stated'];
	const text = draft.source.text.trim();
	const details = [
		...(draft.source.valueKind ? [valueKinds[draft.source.valueKind]] : []),
		...(draft.source.spreadMeans ? [spreadKinds[draft.source.spreadMeans]] : [])
	];
	const suffix = details.length > 0 ? `; ${details.join(', ')}` : '';
	switch (draft.source.kind) {
		case 'citation':
			return text ? ['published ', cite(context.sources.add(text)), suffix] : ['not stated', suffix];
		case 'file':
			return [...fileSource(context, draft), suffix];
		case 'judgement':
			return [`author’s judgement${text ? `: ${text.replace(/\.$/, '')}` : ''}`, suffix];
		case 'default':
			return defaultSource(context, text);
		default:
			return ['not stated', suffix];
	}
}

function shareOf(context: Context, column: string): { share: string | null; shareValue: number } {
	const sensitivity = context.run.result.outputs[context.leading]?.sensitivity;
	if (!sensitivity) return { share: null, shareValue: 0 };
	const value = sensitivity[column]?.share ?? 0;
	return { share: share(value), shareValue: value };
}

function numberRow(context: Context, input: NumberInput, used: InputUsed): AssumptionRow {
	const draft = used.given ? context.run.draft.assumptions[input.id] : undefined;
	const given = context.run.request.inputs[input.id];
	const request = given && !Array.isArray(given) && 'value' in given ? given : undefined;
	const typedUnit = (request?.unit as string | undefined) ?? used.unit;
	const requested = typeof request?.value === 'number' ? request.value : undefined;
	const value = typeof used.value === 'number' ? used.value : 0;
	const own = attachUnit(formatSignificant(value, requested === undefined ? 10 : 6), used.unit);
	const typed =
		requested === undefined ? own : attachUnit(typedNumber(draft?.value ?? '', requested), typedUnit);
	const uncertainty = used.standardUncertainty ?? 0;
	const printed =
		isTemperatureUnit(typedUnit) && isTemperatureUnit(used.unit)
			? convertDifference(uncertainty, used.unit, unitOfDifference(typedUnit))
			: convertDifference(uncertainty, used.unit, typedUnit);
	const typedSpread = draft?.spread === 'normal' ? draft.spreadValues.standardUncertainty : undefined;
	const spreadText = typedSpread ? typedNumber(typedSpread, printed) : formatSignificant(printed, 2);
	const spec = (request?.distribution as InputUsed['distribution']) ?? used.distribution ?? { type: 'exact' };
	return {
		id: input.id,
		name: input.name,
		symbol: input.symbol,
		value: typed,
		inOwnUnit: typedUnit === used.unit ? null : own,
		uncertainty: uncertainty > 0 ? attachUnit(spreadText, unitOfDifference(typedUnit)) : null,
		distribution: distributionText(spec, typedUnit, unitOfDifference(typedUnit)),
		provenance: provenanceOf(draft, used),
		source: sourcePhrase(context, draft, used),
		note: draft?.note.trim() ?? '',
		...shareOf(context, input.id)
	};
}

function cellText(cell: TableCell | undefined): string {
	if (cell === undefined) return '';
	if (typeof cell === 'number') return formatSignificant(cell, 10);
	if (typeof cell === 'string') return cell;
	if (Array.isArray(cell)) return cell.join(', ');
	const value = typeof cell.value === 'number' ? formatSignificant(cell.value, 10) : (cell.value ?? '');
	return attachUnit(value, cell.unit ?? '');
}

/** A row of a table input: its name, and its cells one after the other. */
function tableRow(id: string, specName: string, row: TableRow, index: number): AssumptionRow {
	const { name, ...cells } = row;
	return {
		id: `${id}.${index}`,
		name: typeof name === 'string' ? name : `${specName}, row ${index + 1}`,
		symbol: '',
		value: Object.values(cells).map(cellText).filter(Boolean).join('; '),
		inOwnUnit: null,
		uncertainty: null,
		distribution: britishEnglish.distribution.exact,
		provenance: 'not-stated',
		source: [''],
		note: '',
		share: null,
		shareValue: 0
	};
}

/** Every assumption of a run in the method's order, defaults included. */
export function assumptionRows(context: Context): AssumptionRow[] {
	return context.method.inputs.flatMap((input): AssumptionRow[] => {
		const used = context.run.result.inputs[input.id];
		if (used === undefined) return [];
		if (Array.isArray(used)) return used.map((row, i) => tableRow(input.id, input.name, row, i));
		if (input.kind !== 'number') {
			return [
				{
					...tableRow(input.id, input.name, {}, 0),
					id: input.id,
					name: input.name,
					value: String(used.value),
					provenance: provenanceOf(context.run.draft.assumptions[input.id], used),
					source: sourcePhrase(context, context.run.draft.assumptions[input.id], used)
				}
			];
		}
		return [numberRow(context, input, used)];
	});
}

/** Defaults replaced and options set otherwise than usual, for the reader who knows the method. */
export function deviations(method: Method, run: RunSource): string[] {
	const replaced = method.inputs.flatMap((input) => {
		if (input.kind !== 'number' || !input.default) return [];
		const used = run.result.inputs[input.id];
		if (!used || Array.isArray(used) || !used.given || used.value === input.default.value) return [];
		const usual =
			typeof input.default.value === 'number'
				? formatSignificant(input.default.value, 10)
				: input.default.value;
		const taken = typeof used.value === 'number' ? formatSignificant(used.value, 10) : used.value;
		return [
			`The method’s default ${input.name} of ${attachUnit(usual, input.unit)} was replaced by ${attachUnit(taken, used.unit)}.`
		];
	});
	const options = method.options.flatMap((option) => {
		const taken = run.result.options[option.id];
		if (taken === undefined || taken === option.default) return [];
		const label = option.choices?.find((choice) => choice.value === taken)?.label ?? String(taken);
		return [`Option “${option.name}” was set to “${label}”.`];
	});
	return [...replaced, ...options];
}
