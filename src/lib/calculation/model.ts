import { methodById } from '../methods';
import type {
	Columns,
	Method,
	NumberInput,
	OutputSpec,
	PreparedMethod,
	Range,
	Setting
} from '../methods/types';
import { differenceFromSi, fromSi, toSi } from '../quantities/convert';
import { sameDimension } from '../quantities/parse-unit';
import type { InputColumn } from '../uncertainty/trial-model';
import { checkDomain, defaultInput, givenInput, isInside, ownUnitOf, rangeInSi } from './check-input';
import { optionsAt } from './check-options';
import { isPlainObject, objectAt, own, pointer, quoted, textAt } from './json';
import { ProblemError } from './problem';
import type { InputUsed, Options } from './types';

const deepestLink = 4;

/** An input that is another method's output, evaluated in the same trials. */
interface Link {
	input: string;
	node: Node;
	output: string;
	buffer: Record<string, Float64Array>;
	/** Physical domain of the input, in SI. */
	domain: Range;
}

/** One method with its checked inputs; `columns` says which drawn column each input reads. */
interface Node {
	method: Method;
	setting: Setting;
	prepared: PreparedMethod;
	columns: ReadonlyMap<string, string>;
	links: readonly Link[];
}

/** A request's method and inputs, ready to evaluate over columns of trials. */
export interface CompiledModel {
	method: Method;
	setting: Setting;
	outputs: readonly OutputSpec[];
	prepared: PreparedMethod;
	columns: readonly InputColumn[];
	used: Record<string, InputUsed>;
	/** Inputs that read the column of another under the same shared name: their own name to its. */
	aliases: ReadonlyMap<string, string>;
	options: Options;
	/** Own unit by column id, for sensitivities. */
	unitOf: ReadonlyMap<string, string>;
	evaluate(inputs: Columns, n: number, out: Record<string, Float64Array>): void;
	/** Flags trials in which a linked input is physically impossible; there only where there are links. */
	reject?(inputs: Columns, n: number, flags: Uint8Array): void;
	/** The inputs as the root method's own evaluation reads them. */
	local(inputs: Columns, n: number): Columns;
}

class Compiler {
	readonly columns = new Map<string, InputColumn>();
	readonly used: Record<string, InputUsed> = {};
	readonly unitOf = new Map<string, string>();
	/** Inputs that read another's column, by their own names. */
	readonly aliases = new Map<string, string>();
	private readonly sharedColumns = new Map<string, { column: InputColumn; text: string }>();

	node(id: unknown, inputs: unknown, options: unknown, path: string, prefix: string, depth: number): Node {
		const method = typeof id === 'string' ? methodById(id) : undefined;
		if (method === undefined) {
			throw new ProblemError('unknown-method', `There is no method ${quoted(id)}.`, pointer(path, 'method'));
		}
		const inputsPath = pointer(path, 'inputs');
		const entries = objectAt(
			inputs,
			inputsPath,
			method.inputs.map((input) => input.id)
		);
		const resolved = optionsAt(method, options, pointer(path, 'options'));
		checkAlternatives(method, entries, inputsPath);
		const columns = new Map<string, string>();
		const links: Link[] = [];
		const values: Record<string, number> = {};
		const given = new Set<string>();
		for (const spec of method.inputs) {
			if (spec.kind !== 'number') continue;
			const entry = own(entries, spec.id);
			const at = pointer(inputsPath, spec.id);
			if (entry !== undefined) given.add(spec.id);
			if (isPlainObject(entry) && entry.from !== undefined) {
				const link = this.link(spec, entry, at, prefix, depth);
				links.push(link.link);
				values[spec.id] = link.value;
				continue;
			}
			const column = this.input(method, spec, entry, at, prefix, isDropped(method, spec.id, entries));
			if (column === undefined) continue;
			columns.set(spec.id, column.id);
			values[spec.id] = column.value;
		}
		const setting: Setting = {
			values,
			tables: {},
			texts: {},
			options: resolved,
			given: (input) => given.has(input),
			has: (input) => Object.hasOwn(values, input)
		};
		return { method, setting, prepared: method.prepare(setting), columns, links };
	}

	private input(
		method: Method,
		spec: NumberInput,
		entry: unknown,
		path: string,
		prefix: string,
		dropped: boolean
	): InputColumn | undefined {
		if (entry === undefined && (spec.default === undefined || dropped)) {
			if (spec.optional === true || dropped) return undefined;
			throw new ProblemError('missing', `The ${spec.name} is missing.`, path);
		}
		const checked =
			entry === undefined && spec.default !== undefined
				? defaultInput(method, spec, spec.default, path)
				: givenInput(spec, entry, path);
		const id = prefix + spec.id;
		this.used[id] = checked.used;
		const text = JSON.stringify([checked.column.value, checked.used.unit, checked.used.distribution ?? null]);
		const first = checked.shared === undefined ? undefined : this.sharedColumns.get(checked.shared);
		if (first === undefined) {
			const column = { ...checked.column, id };
			this.columns.set(id, column);
			this.unitOf.set(id, spec.unit);
			if (checked.shared !== undefined) this.sharedColumns.set(checked.shared, { column, text });
			return column;
		}
		// The first input under a shared name is drawn; the others must be the same quantity and read its column.
		if (first.text !== text) {
			throw new ProblemError(
				'shared-differs',
				`The inputs shared as ${quoted(checked.shared)} differ; a shared quantity has one value and one distribution.`,
				path
			);
		}
		first.column.domain = narrower(first.column.domain, checked.column.domain);
		this.aliases.set(id, first.column.id);
		return first.column;
	}

	private link(
		spec: NumberInput,
		entry: Readonly<Record<string, unknown>>,
		path: string,
		prefix: string,
		depth: number
	): { link: Link; value: number } {
		objectAt(entry, path, ['from']);
		const at = pointer(path, 'from');
		if (depth >= deepestLink) {
			throw new ProblemError('too-deep', `Links may be at most ${deepestLink} deep.`, at);
		}
		const from = objectAt(entry.from, at, ['method', 'inputs', 'options', 'output']);
		const node = this.node(from.method, from.inputs, from.options, at, `${prefix}${spec.id}.`, depth + 1);
		const output = textAt(from.output, pointer(at, 'output'), 200);
		const outputSpec = node.prepared.outputs.find(({ id }) => id === output);
		if (outputSpec === undefined) {
			throw new ProblemError(
				'unknown-output',
				`${node.method.id} gives no output ${quoted(output)} from these inputs.`,
				pointer(at, 'output')
			);
		}
		const own = ownUnitOf(spec.unit);
		if (!sameDimension(ownUnitOf(outputSpec.unit).dimension, own.dimension)) {
			throw new ProblemError(
				'wrong-dimension',
				`The ${outputSpec.name} is no ${spec.name}: the units differ in kind.`,
				pointer(at, 'output')
			);
		}
		const out = buffers(node, 1);
		evaluateNode(node, this.estimates(), 1, out);
		const value = out[output]?.[0] as number;
		checkDomain(spec, fromSi(value, own), path);
		this.used[prefix + spec.id] = {
			value: fromSi(value, own),
			unit: spec.unit,
			given: true,
			source: `Output ${output} of ${node.method.id} ${node.method.version}.`
		};
		return { link: { input: spec.id, node, output, buffer: {}, domain: rangeInSi(spec.domain, own) }, value };
	}

	private estimates(): Columns {
		return Object.fromEntries(
			[...this.columns.values()].map(({ id, value }) => [id, Float64Array.of(value)])
		);
	}
}

/** What lies inside both ranges. */
function narrower(a: Range, b: Range): Range {
	const fromB =
		a.low === null || (b.low !== null && (b.low > a.low || (b.low === a.low && b.lowOpen === true)));
	const toB =
		a.high === null || (b.high !== null && (b.high < a.high || (b.high === a.high && b.highOpen === true)));
	return {
		low: (fromB ? b : a).low,
		lowOpen: (fromB ? b : a).lowOpen,
		high: (toB ? b : a).high,
		highOpen: (toB ? b : a).highOpen
	};
}

/** Two ways of giving the same thing at once are an error. */
function checkAlternatives(method: Method, entries: Readonly<Record<string, unknown>>, path: string): void {
	for (const { ways } of method.alternatives) {
		const used = ways.filter((way) => way.some((id) => own(entries, id) !== undefined));
		if (used.length > 1) {
			const second = used[1]?.find((id) => own(entries, id) !== undefined) ?? '';
			throw new ProblemError(
				'two-alternatives',
				`Give either ${ways.map((way) => way.join(' with ')).join(' or ')}, not both.`,
				pointer(path, second)
			);
		}
	}
}

/** An input of a way that is not used: its default is dropped and it is not missed. */
function isDropped(method: Method, id: string, entries: Readonly<Record<string, unknown>>): boolean {
	const groups = method.alternatives.filter(({ ways }) => ways.some((way) => way.includes(id)));
	return groups.some(({ ways }) => {
		const used = ways.find((way) => way.some((other) => own(entries, other) !== undefined)) ?? ways[0];
		return used !== undefined && !used.includes(id);
	});
}

function buffers(node: Node, n: number): Record<string, Float64Array> {
	return Object.fromEntries(node.prepared.outputs.map(({ id }) => [id, new Float64Array(n)]));
}

function localColumns(node: Node, inputs: Columns, n: number): Columns {
	const local: Record<string, Float64Array> = {};
	for (const [input, column] of node.columns) local[input] = inputs[column] as Float64Array;
	for (const link of node.links) {
		if ((link.buffer[link.output]?.length ?? 0) < n) link.buffer = buffers(link.node, n);
		evaluateNode(link.node, inputs, n, link.buffer);
		local[link.input] = link.buffer[link.output] as Float64Array;
	}
	return local;
}

/** Flags the trials in which a linked quantity, at any depth, lies outside its domain. */
function rejectNode(node: Node, inputs: Columns, n: number, flags: Uint8Array): void {
	const local = localColumns(node, inputs, n);
	for (const link of node.links) {
		rejectNode(link.node, inputs, n, flags);
		const values = local[link.input] as Float64Array;
		for (let i = 0; i < n; i++) if (!isInside(values[i] as number, link.domain)) flags[i] = 1;
	}
}

function evaluateNode(node: Node, inputs: Columns, n: number, out: Record<string, Float64Array>): void {
	node.prepared.evaluate(localColumns(node, inputs, n), n, out);
}

/** Checks method, inputs and options of a request and makes them ready to evaluate. */
export function compileModel(method: unknown, inputs: unknown, options: unknown): CompiledModel {
	const compiler = new Compiler();
	const root = compiler.node(method, inputs, options, '', '', 0);
	return {
		method: root.method,
		setting: root.setting,
		outputs: root.prepared.outputs,
		prepared: root.prepared,
		columns: [...compiler.columns.values()],
		used: compiler.used,
		aliases: compiler.aliases,
		options: root.setting.options as Options,
		unitOf: compiler.unitOf,
		evaluate: (columns, n, out) => evaluateNode(root, columns, n, out),
		...(root.links.length === 0
			? {}
			: { reject: (columns: Columns, n: number, flags: Uint8Array) => rejectNode(root, columns, n, flags) }),
		local: (columns, n) => localColumns(root, columns, n)
	};
}

/** A coefficient in SI per SI as output unit per input unit. */
export function coefficientInUnits(coefficient: number, inputUnit: string, outputUnit: string): number {
	const input = ownUnitOf(inputUnit);
	const output = ownUnitOf(outputUnit);
	return differenceFromSi(coefficient, output) * (toSi(1, input) - toSi(0, input));
}
