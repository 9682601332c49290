import { ProblemError } from '../../lib/calculation/problem';

const usage = 'Usage: npm run -s compute -- FILE.json [--threads N]; "-" reads standard input.';

export interface Arguments {
	file: string;
	/** Most threads to use; a result never depends on it. */
	threads: number | undefined;
}

/** @throws ProblemError for arguments that cannot be understood */
export function parseArguments(given: readonly string[]): Arguments {
	let file: string | undefined;
	let threads: number | undefined;
	for (let i = 0; i < given.length; i++) {
		const word = given[i] as string;
		if (word === '--threads' || word.startsWith('--threads=')) {
			const text = word === '--threads' ? given[++i] : word.slice('--threads='.length);
			threads = Number(text);
			if (text === undefined || !/^\d+$/.test(text) || threads < 1 || threads > 256) {
				throw new ProblemError('usage', `--threads takes a whole number from 1 to 256. ${usage}`, '');
			}
		} else if (word.startsWith('--') || file !== undefined) {
			throw new ProblemError('usage', usage, '');
		} else {
			file = word;
		}
	}
	if (file === undefined) throw new ProblemError('usage', usage, '');
	return { file, threads };
}
