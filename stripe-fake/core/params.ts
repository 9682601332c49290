import { invalidRequest } from './errors';
import type { FormNode, FormTree } from './form';

type Metadata = Record<string, string>;

/**
 * Reads the parameters of a request. What is never read is unknown: `done` refuses it, before anything was changed.
 * In every reading `undefined` means "not given" and, where the API allows it, `null` means "given empty: clear it".
 */
export class Params {
	private readonly read = new Set<string>();
	private readonly children: Params[] = [];
	/** Once all parameters are in order the request is being executed, and its result is kept for its key. */
	finished = false;

	constructor(
		private readonly tree: FormTree,
		private readonly path = ''
	) {}

	private named(name: string): string {
		return this.path === '' ? name : `${this.path}[${name}]`;
	}

	private take(name: string): FormNode | undefined {
		this.read.add(name);
		return this.tree[name];
	}

	private takeText(name: string): string | undefined {
		const value = this.take(name);
		if (typeof value === 'object')
			throw invalidRequest(`Invalid string: ${JSON.stringify(value)}`, { param: this.named(name) });
		return value;
	}

	/** Whether it was given at all. */
	has(name: string): boolean {
		return this.tree[name] !== undefined;
	}

	/** A text that may be cleared. */
	text(name: string): string | null | undefined {
		const value = this.takeText(name);
		return value === '' ? null : value;
	}

	/** A text that may not be empty. */
	string(name: string): string | undefined {
		const value = this.takeText(name);
		if (value === '')
			throw invalidRequest(
				`You passed an empty string for '${this.named(name)}'. We assume empty values are an attempt to unset a parameter; however '${this.named(name)}' cannot be unset. You should remove '${this.named(name)}' from your request or supply a non-empty value.`,
				{ code: 'parameter_invalid_empty', param: this.named(name) }
			);
		return value;
	}

	required(name: string): string {
		const value = this.string(name);
		if (value === undefined) throw this.missing(name);
		return value;
	}

	missing(name: string): Error {
		return invalidRequest(`Missing required param: ${this.named(name)}.`, {
			code: 'parameter_missing',
			param: this.named(name)
		});
	}

	refuse(name: string, message: string, code?: string): Error {
		return invalidRequest(message, { param: this.named(name), ...(code === undefined ? {} : { code }) });
	}

	integer(name: string, { least }: { least?: number } = {}): number | undefined {
		const value = this.string(name);
		if (value === undefined) return undefined;
		const number = Number(value);
		if (!/^-?\d+$/.test(value) || !Number.isSafeInteger(number))
			throw invalidRequest(`Invalid integer: ${value}`, {
				code: 'parameter_invalid_integer',
				param: this.named(name)
			});
		if (least !== undefined && number < least)
			throw invalidRequest(`This value must be greater than or equal to ${least}.`, {
				code: 'parameter_invalid_integer',
				param: this.named(name)
			});
		return number;
	}

	boolean(name: string): boolean | undefined {
		const value = this.string(name);
		if (value === undefined) return undefined;
		if (value !== 'true' && value !== 'false')
			throw invalidRequest(`Invalid boolean: ${value}`, { param: this.named(name) });
		return value === 'true';
	}

	oneOf<const T extends string>(name: string, values: readonly T[]): T | undefined {
		const value = this.string(name);
		if (value === undefined) return undefined;
		const found = values.find((allowed) => allowed === value);
		if (found === undefined)
			throw invalidRequest(`Invalid ${this.named(name)}: must be one of ${values.join(', ')}`, {
				param: this.named(name)
			});
		return found;
	}

	/** An object of parameters; an empty text for it counts as not given. */
	child(name: string): Params | undefined {
		const value = this.take(name);
		if (value === undefined || value === '') return undefined;
		if (typeof value === 'string') throw invalidRequest('Invalid object', { param: this.named(name) });
		const child = new Params(value, this.named(name));
		this.children.push(child);
		return child;
	}

	private elements(name: string): FormNode[] | undefined {
		const value = this.take(name);
		if (value === undefined) return undefined;
		if (value === '') return [];
		if (typeof value === 'string' || Object.keys(value).some((key) => !/^\d+$/.test(key)))
			throw invalidRequest('Invalid array', { param: this.named(name) });
		return Object.keys(value)
			.sort((one, other) => Number(one) - Number(other))
			.map((key) => value[key] ?? '');
	}

	list(name: string): Params[] | undefined {
		return this.elements(name)?.map((element, index) => {
			const path = `${this.named(name)}[${index}]`;
			if (typeof element === 'string') throw invalidRequest('Invalid object', { param: path });
			const child = new Params(element, path);
			this.children.push(child);
			return child;
		});
	}

	strings(name: string): string[] | undefined {
		return this.elements(name)?.map((element, index) => {
			if (typeof element !== 'string')
				throw invalidRequest('Invalid string', { param: `${this.named(name)}[${index}]` });
			return element;
		});
	}

	/** Given keys with their text, an empty one to remove the key; `null` to remove all. */
	metadata(name = 'metadata'): Metadata | null | undefined {
		const value = this.take(name);
		if (value === undefined) return undefined;
		if (value === '') return null;
		const param = this.named(name);
		if (typeof value === 'string') throw invalidRequest('Invalid object', { param });
		const given: Metadata = {};
		for (const [key, text] of Object.entries(value)) {
			if (typeof text !== 'string')
				throw invalidRequest('Metadata values must be strings.', { param: `${param}[${key}]` });
			if (key.length > 40 || text.length > 500)
				throw invalidRequest(
					'Metadata keys can be up to 40 characters long and values up to 500 characters.',
					{ param: `${param}[${key}]` }
				);
			given[key] = text;
		}
		if (Object.keys(given).length > 50)
			throw invalidRequest('You can specify up to 50 metadata keys.', { param });
		return given;
	}

	/** Parameters that Stripe takes and that change nothing here. */
	ignore(...names: string[]): void {
		for (const name of names) this.read.add(name);
	}

	private unread(): string[] {
		return [
			...Object.keys(this.tree)
				.filter((name) => !this.read.has(name))
				.map((name) => this.named(name)),
			...this.children.flatMap((child) => child.unread())
		];
	}

	/** @throws ApiError `parameter_unknown` where something was given that nothing has read */
	done(): void {
		const [unknown] = this.unread();
		if (unknown !== undefined)
			throw invalidRequest(`Received unknown parameter: ${unknown}`, {
				code: 'parameter_unknown',
				param: unknown
			});
		this.finished = true;
	}
}

/** What metadata is after a request that gave `given`. */
export function mergeMetadata(before: Metadata | null, given: Metadata | null | undefined): Metadata {
	if (given === null) return {};
	const merged = { ...before, ...given };
	return Object.fromEntries(Object.entries(merged).filter(([, text]) => text !== ''));
}
