import { isMainThread } from 'node:worker_threads';

/*
 * Loaded before a child's own program: when the parent is gone, even killed, the pipe on standard input ends and the
 * child stops in good order instead of living on unseen. A thread of the child loads this too, and has no such pipe.
 */
if (isMainThread) {
	process.stdin.on('error', () => undefined);
	process.stdin.on('close', () => process.kill(process.pid, 'SIGTERM'));
	process.stdin.resume();
	/** @type {import('node:net').Socket} */ (process.stdin).unref();
}
