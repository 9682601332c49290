import { readFile } from 'node:fs/promises';
import { availableParallelism } from 'node:os';
import { isMainThread } from 'node:worker_threads';
import { parseArguments } from './compute/arguments';
import { serveShare } from './compute/threads';
import { answer, problemOf } from './compute/answer';

/* `npm run -s compute -- FILE.json|- [--threads N]`: requests in, results out; exit 0, or 2 where any request failed. */

async function input(file: string): Promise<string> {
	if (file !== '-') return readFile(file, 'utf8');
	const parts: Buffer[] = [];
	for await (const part of process.stdin) parts.push(part as Buffer);
	return Buffer.concat(parts).toString('utf8');
}

/** Writes all of it before the process may end. */
function write(stream: NodeJS.WriteStream, text: string): Promise<void> {
	return new Promise((resolve, reject) => {
		stream.write(text, (fault) => (fault == null ? resolve() : reject(fault)));
	});
}

if (isMainThread) await main();
else await serveShare();

async function main(): Promise<void> {
	try {
		const { file, threads } = parseArguments(process.argv.slice(2));
		const { output, failed } = await answer(await input(file), threads ?? availableParallelism());
		await write(process.stdout, `${JSON.stringify(output, null, 2)}\n`);
		if (failed) process.exitCode = 2;
	} catch (fault) {
		await write(process.stderr, `${JSON.stringify(problemOf(fault))}\n`);
		process.exitCode = 2;
	}
}
