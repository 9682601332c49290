import { spawnSync } from 'node:child_process';
import { writeFileSync, mkdtempSync, rmSync } from 'node:fs';
import { availableParallelism, cpus, tmpdir } from 'node:os';
import { join } from 'node:path';
import { compute } from '../lib/calculation';
import type { ComputeRequest } from '../lib/calculation/types';

/*
 * Times of the computing, as medians of alternating runs. Figures to compare on one machine, not to test against: a
 * busy machine doubles them.
 */

const rounds = 7;

const requests: Readonly<Record<string, ComputeRequest>> = {
	'effective-temperature': {
		method: 'effective-temperature',
		inputs: {
			irradiance: { value: 1361, distribution: { type: 'normal', standardUncertainty: 0.5 } },
			bondAlbedo: { value: 0.294, distribution: { type: 'rectangular', halfWidth: 0.01 } }
		}
	},
	'sunlit-equilibrium': {
		method: 'sunlit-equilibrium',
		inputs: {
			irradiance: { value: 1361, distribution: { type: 'normal', standardUncertainty: 0.5 } },
			bondAlbedo: { value: 0.12, distribution: { type: 'rectangular', halfWidth: 0.01 } },
			emissivity: { value: 0.95, distribution: { type: 'normal', standardUncertainty: 0.01 } }
		}
	},
	'solar-reflectance-index': {
		method: 'solar-reflectance-index',
		inputs: {
			solarReflectance: { value: 0.69, distribution: { type: 'normal', standardUncertainty: 0.012 } },
			thermalEmittance: { value: 0.88, distribution: { type: 'normal', standardUncertainty: 0.01 } }
		}
	}
};

function median(times: readonly number[]): number {
	return [...times].sort((a, b) => a - b)[Math.floor(times.length / 2)] ?? NaN;
}

async function timed(request: ComputeRequest, trials: number): Promise<number> {
	const began = performance.now();
	await compute({ ...request, evaluation: { trials, interval: 'shortest' } });
	return performance.now() - began;
}

function wholeProcess(): number {
	const folder = mkdtempSync(join(tmpdir(), 'noonmark-bench-'));
	try {
		const file = join(folder, 'request.json');
		writeFileSync(file, JSON.stringify(requests['solar-reflectance-index']));
		const times = Array.from({ length: rounds }, () => {
			const began = performance.now();
			const done = spawnSync('npm', ['run', '-s', 'compute', '--', file], { encoding: 'utf8' });
			if (done.status !== 0) throw new Error(`The command failed: ${done.stderr}`);
			return performance.now() - began;
		});
		return median(times);
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
}

const print = (line: string) => process.stdout.write(`${line}\n`);

print(
	`${cpus()[0]?.model ?? 'unknown processor'}, ${availableParallelism()} cores, Node.js ${process.version}`
);
print('compute(), shortest interval, median of 7, milliseconds, in one thread and warm:');
for (const trials of [20_000, 200_000, 1_000_000]) {
	const times = new Map(Object.keys(requests).map((id) => [id, [] as number[]]));
	for (let round = -1; round < rounds; round++) {
		for (const [id, request] of Object.entries(requests)) {
			const time = await timed(request, trials);
			if (round >= 0) times.get(id)?.push(time);
		}
	}
	for (const [id, list] of times) {
		print(
			`  ${id.padEnd(26)}${trials.toLocaleString('en-GB').padStart(10)} trials${median(list).toFixed(1).padStart(9)}`
		);
	}
}
print(`npm run -s compute on a small request, whole process: ${(wholeProcess() / 1000).toFixed(2)} s`);
