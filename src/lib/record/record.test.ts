import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { computeNow } from '../calculation';
import type { ComputationRecord } from '../calculation/types';
import { canonicalJson, recompute, recordHash, sealRecord } from './index';

const request = {
	method: 'effective-temperature',
	inputs: {
		bondAlbedo: { value: 0.3, distribution: { type: 'normal' as const, standardUncertainty: 0.01 } }
	},
	evaluation: { trials: 10_000 }
};

function stored(): ComputationRecord {
	return JSON.parse(JSON.stringify({ request, result: computeNow(request) })) as ComputationRecord;
}

describe('records', () => {
	it('the hash is that of the canonical JSON without itself', () => {
		const { result } = stored();
		const { record, ...bare } = result;
		const text = canonicalJson({ request, result: bare });
		expect(record).toBe(`sha256:${createHash('sha256').update(text).digest('hex')}`);
		expect(sealRecord(request, bare).record).toBe(record);
	});

	it('recomputes to the last bit', async () => {
		const outcome = await recompute(stored());
		expect(outcome.recomputed).toBe(true);
		expect(outcome.figures).toBeGreaterThan(100);
		expect(outcome.differences).toEqual([]);
	});

	it('finds a changed figure, even where the hash was made anew', async () => {
		const record = stored();
		const output = record.result.outputs.effectiveTemperature;
		if (output === undefined) throw new Error('no output');
		output.value += 1e-13 * output.value;
		record.result.record = recordHash(record.request, record.result);
		const outcome = await recompute(record);
		expect(outcome.recomputed).toBe(false);
		expect(outcome.differences.map(({ path }) => path)).toEqual(['/outputs/effectiveTemperature/value']);
	});

	it('finds a changed request, word or hash', async () => {
		const reworded = stored();
		(reworded.result.cautions[0] as { text: string }).text += ' Not.';
		expect((await recompute(reworded)).recomputed).toBe(false);
		const asked = stored();
		asked.request.evaluation = { trials: 10_000, seed: 'other' };
		expect((await recompute(asked)).differences.length).toBeGreaterThan(3);
		const hashed = stored();
		hashed.result.record = 'sha256:0';
		expect((await recompute(hashed)).differences.map(({ path }) => path)).toEqual(['/record']);
	});

	it('a stored record is taken for its request', () => {
		const record = stored();
		expect(computeNow(record).record).toBe(record.result.record);
	});

	it('canonical JSON sorts keys and refuses what JSON cannot carry', () => {
		expect(canonicalJson({ b: 1e21, a: [-0, 'ü', null], c: undefined })).toBe('{"a":[0,"ü",null],"b":1e+21}');
		for (const bad of [NaN, Infinity, '\ud800', [undefined], new Date(0), { f: () => 1 }, 1n]) {
			expect(() => canonicalJson({ bad })).toThrow(TypeError);
		}
	});
});
