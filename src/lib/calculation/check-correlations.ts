import { numberAt, objectAt, pointer, quoted, textAt } from './json';
import { ProblemError } from './problem';
import type { Correlation } from './types';

/** Correlations between known columns, each pair once; an alias stands for the column that it reads. */
export function correlationsAt(
	given: unknown,
	path: string,
	columns: ReadonlySet<string>,
	aliases: ReadonlyMap<string, string> = new Map()
): Correlation[] {
	if (given === undefined) return [];
	if (!Array.isArray(given) || given.length > 2000) {
		throw new ProblemError('wrong-type', 'Correlations are a list of at most 2000 entries.', path);
	}
	const seen = new Set<string>();
	return given.map((entry: unknown, i) => {
		const at = pointer(path, i);
		const { a, b, coefficient } = objectAt(entry, at, ['a', 'b', 'coefficient']);
		const [first, second] = (
			[
				['a', a],
				['b', b]
			] as const
		).map(([key, value]) => {
			const name = textAt(value, pointer(at, key), 200);
			const id = aliases.get(name) ?? name;
			if (!columns.has(id)) {
				throw new ProblemError('unknown-input', `There is no input ${quoted(id)} here.`, pointer(at, key));
			}
			return id;
		}) as [string, string];
		const r = numberAt(coefficient, pointer(at, 'coefficient'));
		if (!(r >= -1 && r <= 1)) {
			throw new ProblemError(
				'outside-domain',
				'A correlation coefficient lies from -1 to 1.',
				pointer(at, 'coefficient')
			);
		}
		if (first === second) {
			throw new ProblemError('repeated', 'An input is not correlated with itself.', pointer(at, 'b'));
		}
		const pair = [first, second].sort().join('\n');
		if (seen.has(pair)) {
			throw new ProblemError('repeated', 'The correlation of this pair is stated twice.', at);
		}
		seen.add(pair);
		return { a: first, b: second, coefficient: r };
	});
}
