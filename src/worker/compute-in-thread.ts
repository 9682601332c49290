import { Worker } from 'node:worker_threads';
import { ProblemError } from '../lib/calculation/problem';
import type { ComputeResult } from '../lib/calculation/types';
import type { ComputeBeside } from '../lib/server/jobs/handlers/compute-run';
import type { ThreadMessage } from './compute-thread';

/**
 * Computes in a thread of its own, so that the process goes on renewing its holds on jobs, and a computation that is
 * given up ends at once.
 * @param program the built thread's file
 */
export function computeInThread(program: string): ComputeBeside {
	return (request, { signal, onProgress }) =>
		new Promise<ComputeResult>((resolve, reject) => {
			signal.throwIfAborted();
			const thread = new Worker(program, { workerData: request });
			const abort = () => {
				reject(signal.reason as Error);
				void thread.terminate();
			};
			signal.addEventListener('abort', abort, { once: true });
			thread.on('message', (message: ThreadMessage) => {
				if (message.kind === 'progress') onProgress(message.fraction);
				else if (message.kind === 'result') resolve(message.result);
				else {
					const { code, message: text, path } = message.problem;
					reject(new ProblemError(code, text, path));
				}
			});
			thread.on('error', reject);
			thread.on('exit', (code) => {
				signal.removeEventListener('abort', abort);
				// Settled already, unless it died without a word.
				reject(new Error(`The computation ended with exit code ${code} and no result.`));
			});
		});
}
