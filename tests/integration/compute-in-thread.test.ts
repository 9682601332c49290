import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { beforeAll, expect, it } from 'vitest';
import { compute } from '../../src/lib/calculation/compute';
import { ProblemError } from '../../src/lib/calculation/problem';
import type { ComputeRequest } from '../../src/lib/calculation/types';
import { computeInThread } from '../../src/worker/compute-in-thread';

const program = resolve('.workers/compute-thread.js');
const request = (trials: number): ComputeRequest => ({
	method: 'effective-temperature',
	inputs: {
		irradiance: { value: 1361, distribution: { type: 'normal', standardUncertainty: 0.5 } },
		bondAlbedo: { value: 0.3, distribution: { type: 'normal', standardUncertainty: 0.01 } }
	},
	evaluation: { propagation: 'monte-carlo', trials, seed: 'thread' }
});
const calm = { signal: new AbortController().signal, onProgress: () => undefined };

beforeAll(() => {
	if (!existsSync(program)) throw new Error('Build first: npm test -- integration does.');
});

it('gives the same record as computing in this thread, and tells how far it is', async () => {
	const told: number[] = [];
	const result = await computeInThread(program)(request(500_000), {
		...calm,
		onProgress: (fraction) => told.push(fraction)
	});
	expect(result).toEqual(await compute(request(500_000)));
	expect(told.length).toBeGreaterThan(0);
	expect(told).toEqual([...told].sort((a, b) => a - b));
	expect(Math.max(...told)).toBeLessThanOrEqual(1);
});

it('says which problem a request has', async () => {
	const wrong = { ...request(10_000), inputs: { irradiance: { value: 1361 }, bondAlbedo: { value: 1.2 } } };
	const caught: unknown = await computeInThread(program)(wrong, calm).catch((error: unknown) => error);
	expect(caught).toBeInstanceOf(ProblemError);
	expect((caught as ProblemError).path).toBe('/inputs/bondAlbedo/value');
});

it('ends at once when it is given up', async () => {
	const abort = new AbortController();
	const began = Date.now();
	const running = computeInThread(program)(request(50_000_000), { ...calm, signal: abort.signal });
	setTimeout(() => abort.abort(new Error('given up')), 500);
	await expect(running).rejects.toThrow('given up');
	expect(Date.now() - began).toBeLessThan(5000);
});
