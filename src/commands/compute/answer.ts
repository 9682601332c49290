import { compute } from '../../lib/calculation/compute';
import { ProblemError, type Problem } from '../../lib/calculation/problem';
import { inThreads, tooLong } from './threads';
import { parseStrictJson } from '../../lib/calculation/strict-json';

/** A request may run this long. */
const limitMilliseconds = 300_000;

/** The problem object of a fault of the input; anything else goes on as what it is. */
export function problemOf(fault: unknown): { error: Problem } {
	if (fault instanceof ProblemError) return fault.toJSON();
	if (fault instanceof Error && 'code' in fault && typeof fault.code === 'string' && 'syscall' in fault) {
		return { error: { code: 'unreadable', message: `The file cannot be read: ${fault.message}.`, path: '' } };
	}
	throw fault;
}

async function one(request: unknown, threads: number): Promise<unknown> {
	const end = performance.now() + limitMilliseconds;
	return compute(request, {
		delegate: threads < 2 ? undefined : (delegation) => inThreads(request, delegation, threads, end),
		onProgress: () => {
			if (performance.now() > end) throw tooLong();
		}
	});
}

/**
 * Answers a file of one request or an array of them.
 * @throws ProblemError where a single request fails or the text is no JSON
 */
export async function answer(text: string, threads: number): Promise<{ output: unknown; failed: boolean }> {
	const parsed = parseStrictJson(text);
	if (!Array.isArray(parsed)) return { output: await one(parsed, threads), failed: false };
	const output: unknown[] = [];
	let failed = false;
	for (const request of parsed) {
		try {
			output.push(await one(request, threads));
		} catch (fault) {
			output.push(problemOf(fault));
			failed = true;
		}
	}
	return { output, failed };
}
