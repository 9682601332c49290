import { pointer } from './json';
import { ProblemError } from './problem';

const deepest = 64;

/** Finds a key that stands twice in one object, which JSON.parse would quietly resolve. The text is valid JSON. */
class DuplicateFinder {
	private at = 0;

	constructor(private readonly text: string) {}

	value(path: string, depth: number): void {
		if (depth > deepest) throw new ProblemError('too-deep', 'The JSON is nested too deeply.', path);
		this.space();
		const character = this.text[this.at];
		if (character === '{') this.object(path, depth);
		else if (character === '[') this.array(path, depth);
		else if (character === '"') this.string();
		else while (this.at < this.text.length && !',]} \t\n\r'.includes(this.text[this.at] as string)) this.at++;
		this.space();
	}

	private space(): void {
		while (' \t\n\r'.includes(this.text[this.at] ?? 'x')) this.at++;
	}

	private string(): string {
		const start = this.at++;
		while (this.text[this.at] !== '"') this.at += this.text[this.at] === '\\' ? 2 : 1;
		this.at++;
		return JSON.parse(this.text.slice(start, this.at)) as string;
	}

	private object(path: string, depth: number): void {
		const keys = new Set<string>();
		this.at++;
		this.space();
		while (this.text[this.at] !== '}') {
			const key = this.string();
			const at = pointer(path, key);
			if (keys.has(key)) throw new ProblemError('repeated', 'This key stands twice in one object.', at);
			keys.add(key);
			this.space();
			this.at++;
			this.value(at, depth + 1);
			if (this.text[this.at] === ',') {
				this.at++;
				this.space();
			}
		}
		this.at++;
	}

	private array(path: string, depth: number): void {
		this.at++;
		this.space();
		for (let i = 0; this.text[this.at] !== ']'; i++) {
			this.value(pointer(path, i), depth + 1);
			if (this.text[this.at] === ',') this.at++;
		}
		this.at++;
	}
}

/**
 * JSON of a request: as JSON.parse reads it, but a key that stands twice is an error.
 * @throws ProblemError
 */
export function parseStrictJson(text: string): unknown {
	let parsed: unknown;
	try {
		parsed = JSON.parse(text.startsWith('\ufeff') ? text.slice(1) : text);
	} catch (fault) {
		throw new ProblemError(
			'not-json',
			`The text is not JSON: ${fault instanceof Error ? fault.message : String(fault)}.`,
			''
		);
	}
	new DuplicateFinder(text.startsWith('\ufeff') ? text.slice(1) : text).value('', 0);
	return parsed;
}
