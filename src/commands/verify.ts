/**
 * `npm run -s verify -- report.pdf [--root FILE]`: prints the verdict on a report as one JSON object.
 *
 * Exit code 0 for `genuine` and `intact-issuer-unchecked`, 1 for every other verdict, 2 where the command itself is
 * wrong (nothing on standard output then). Needs neither database nor server nor network.
 */
import { open, readFile } from 'node:fs/promises';
import { parseArgs } from 'node:util';
import { readRoots } from '../lib/server/verification/chain';
import { maxFileBytes, verifyReport } from '../lib/server/verification';

const usage = 'Usage: npm run -s verify -- report.pdf [--root FILE]';

/** The command cannot be carried out as it was given. */
class UsageError extends Error {}

function readArguments(args: string[]): { file: string; root: string | undefined } {
	try {
		const { values, positionals } = parseArgs({
			args,
			options: { root: { type: 'string' } },
			allowPositionals: true
		});
		const [file] = positionals;
		if (file === undefined || positionals.length > 1) throw new UsageError('Name one report.');
		return { file, root: values.root };
	} catch (error) {
		throw new UsageError(`${(error as Error).message}\n${usage}`);
	}
}

async function orUsageError<T>(what: string, work: Promise<T>): Promise<T> {
	try {
		return await work;
	} catch (error) {
		throw new UsageError(`${what} cannot be read: ${(error as Error).message}`);
	}
}

/** At most one byte more than a report may have, so that a larger file is refused without being read. */
async function readBounded(path: string): Promise<Buffer> {
	const file = await open(path);
	try {
		const { size } = await file.stat();
		const bytes = Buffer.alloc(Math.min(size, maxFileBytes + 1));
		let filled = 0;
		while (filled < bytes.length) {
			const { bytesRead } = await file.read(bytes, filled, bytes.length - filled, filled);
			if (bytesRead === 0) break;
			filled += bytesRead;
		}
		return bytes.subarray(0, filled);
	} finally {
		await file.close();
	}
}

async function readRoot(path: string): Promise<string> {
	const pem = await readFile(path, 'utf8');
	readRoots(pem);
	return pem;
}

async function main(args: string[]): Promise<number> {
	const { file, root } = readArguments(args);
	const rootPem = root === undefined ? undefined : await orUsageError(root, readRoot(root));
	const bytes = await orUsageError(file, readBounded(file));
	const result = await verifyReport(bytes, { rootPem });
	process.stdout.write(`${JSON.stringify(result, null, 2)}\n`);
	return result.verdict === 'genuine' || result.verdict === 'intact-issuer-unchecked' ? 0 : 1;
}

try {
	process.exitCode = await main(process.argv.slice(2));
} catch (error) {
	if (!(error instanceof UsageError)) throw error;
	process.stderr.write(`${error.message}\n`);
	process.exitCode = 2;
}
