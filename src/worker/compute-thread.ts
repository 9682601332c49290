import { parentPort, workerData } from 'node:worker_threads';
import { compute } from '../lib/calculation/compute';
import { ProblemError, type Problem } from '../lib/calculation/problem';
import type { ComputeRequest, ComputeResult } from '../lib/calculation/types';

/** What the thread tells the process that started it. */
export type ThreadMessage =
	| { kind: 'progress'; fraction: number }
	| { kind: 'result'; result: ComputeResult }
	| { kind: 'problem'; problem: Problem };

const say = (message: ThreadMessage) => parentPort?.postMessage(message);

try {
	const result = await compute(workerData as ComputeRequest, {
		onProgress: (fraction: number) => say({ kind: 'progress', fraction })
	});
	say({ kind: 'result', result });
} catch (error) {
	if (!(error instanceof ProblemError)) throw error;
	say({ kind: 'problem', problem: { code: error.code, message: error.message, path: error.path } });
}
