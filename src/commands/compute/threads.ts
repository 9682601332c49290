import { parentPort, Worker, workerData } from 'node:worker_threads';
import { unitTexts } from '../../lib/calculation/check-unit';
import { computeShare } from '../../lib/calculation/compute';
import { ProblemError, type Problem } from '../../lib/calculation/problem';
import { loadUnits } from '../../lib/quantities';
import type { Delegation, Share } from '../../lib/uncertainty/monte-carlo';

/** Fewer blocks than this are done sooner by one thread: each further one takes some 40 ms to start. About 2e6 trials. */
const leastBlocks = 488;

interface Order {
	request: unknown;
	delegation: Delegation;
	first: number;
	stride: number;
}

type Answer = { share: Share } | { problem: Problem };

export function tooLong(): ProblemError {
	return new ProblemError('time-limit', 'The request took more than 300 seconds. Ask for fewer trials.', '');
}

/** Shares the blocks out among threads of this same program; undefined where one thread is as good. */
export async function inThreads(
	request: unknown,
	delegation: Delegation,
	threads: number,
	end: number
): Promise<readonly Share[] | undefined> {
	if (delegation.blocks < leastBlocks) return undefined;
	const orders = Array.from({ length: threads }, (_, first): Order => ({
		request,
		delegation,
		first,
		stride: threads
	}));
	const workers = orders.map((order) => new Worker(new URL(import.meta.url), { workerData: order }));
	let timer: NodeJS.Timeout | undefined;
	try {
		const late = new Promise<never>((_resolve, reject) => {
			timer = setTimeout(() => reject(tooLong()), Math.max(0, end - performance.now()));
		});
		return await Promise.race([Promise.all(workers.map(shareOf)), late]);
	} finally {
		clearTimeout(timer);
		await Promise.all(workers.map((worker) => worker.terminate()));
	}
}

function shareOf(worker: Worker): Promise<Share> {
	return new Promise((resolve, reject) => {
		worker.once('message', (answer: Answer) => {
			if ('share' in answer) resolve(answer.share);
			else reject(new ProblemError(answer.problem.code, answer.problem.message, answer.problem.path));
		});
		worker.once('error', reject);
	});
}

/** The thread's side: one share of the trials, then the end. */
export async function serveShare(): Promise<void> {
	const { request, delegation, first, stride } = workerData as Order;
	let answer: Answer;
	try {
		await loadUnits(unitTexts(request));
		answer = { share: computeShare(request, delegation, first, stride) };
	} catch (fault) {
		if (!(fault instanceof ProblemError)) throw fault;
		answer = { problem: fault.toJSON().error };
	}
	parentPort?.postMessage(answer);
}
