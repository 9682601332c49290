import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { computeNow } from '../lib/calculation';
import type { ComputeResult } from '../lib/calculation/types';
import { parseArguments } from './compute/arguments';

const folder = mkdtempSync(path.join(tmpdir(), 'compute-'));
afterAll(() => rmSync(folder, { recursive: true }));

const request = {
	method: 'effective-temperature',
	inputs: { bondAlbedo: { value: 0.3, distribution: { type: 'normal', standardUncertainty: 0.01 } } },
	evaluation: { trials: 10_000 }
};

function run(args: string[], input?: string) {
	const { status, stdout, stderr } = spawnSync(process.execPath, ['scripts/compute.mjs', ...args], {
		input,
		encoding: 'utf8'
	});
	return { status, stdout, stderr };
}

describe('compute command', { timeout: 60_000 }, () => {
	it('answers a file with the result and exit 0, the same as the function gives', () => {
		const file = path.join(folder, 'request.json');
		writeFileSync(file, JSON.stringify(request));
		const { status, stdout, stderr } = run([file, '--threads', '2']);
		expect({ status, stderr }).toEqual({ status: 0, stderr: '' });
		expect(JSON.parse(stdout)).toEqual(JSON.parse(JSON.stringify(computeNow(request))));
	});

	it('takes standard input and a stored record', () => {
		const record = { request, result: computeNow(request) };
		const { status, stdout } = run(['-'], JSON.stringify(record));
		expect(status).toBe(0);
		expect((JSON.parse(stdout) as ComputeResult).record).toBe(record.result.record);
	});

	it('answers bad input with a problem on standard error alone, and exit 2', () => {
		const { status, stdout, stderr } = run(
			['-'],
			'{"method":"effective-temperature","inputs":{"bondAlbedo":{"value":2}}}'
		);
		expect(status).toBe(2);
		expect(stdout).toBe('');
		expect(JSON.parse(stderr)).toMatchObject({
			error: { code: 'outside-domain', path: '/inputs/bondAlbedo/value' }
		});
	});

	it('answers an array in order, failures as their problems', () => {
		const { status, stdout } = run(['-'], JSON.stringify([request, { method: 'none' }, request]));
		expect(status).toBe(2);
		const answers = JSON.parse(stdout) as [ComputeResult, unknown, ComputeResult];
		expect(answers[0].record).toBe(answers[2].record);
		expect(answers[1]).toMatchObject({ error: { code: 'unknown-method', path: '/method' } });
	});

	it('says what is wrong with a missing file, no JSON and odd arguments', () => {
		for (const [args, code] of [
			[[path.join(folder, 'none.json')], 'unreadable'],
			[[], 'usage'],
			[['-', '--threads', 'many'], 'usage'],
			[['a', 'b'], 'usage']
		] as const) {
			const { status, stderr } = run([...args], '');
			expect(status).toBe(2);
			expect(JSON.parse(stderr)).toMatchObject({ error: { code } });
		}
		expect(parseArguments(['x.json', '--threads=3'])).toEqual({ file: 'x.json', threads: 3 });
	});
});
