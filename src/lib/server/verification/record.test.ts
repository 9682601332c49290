import { beforeAll, describe, expect, it } from 'vitest';
import { compute } from '../../calculation/compute';
import type { ComputeRequest, ComputeResult } from '../../calculation/types';
import { recordHash } from '../../record';
import { signedSample, testAuthority, type TestAuthority } from '../signing/testing/signed-sample';
import type { VerificationResult } from './types';
import { verifyReport } from './verify-report';

const request: ComputeRequest = {
	method: 'effective-temperature',
	inputs: {
		irradiance: { value: 1361, unit: 'W/m^2', distribution: { type: 'normal', standardUncertainty: 0.5 } },
		bondAlbedo: { value: 0.294, distribution: { type: 'rectangular', halfWidth: 0.01 } },
		emissivity: { value: 1 }
	},
	evaluation: { propagation: 'monte-carlo', trials: 20_000, seed: 'verification' }
};

let authority: TestAuthority;
let result: ComputeResult;

/** The verdict on a report that was signed, rightly, over the given records. */
async function verify(records: unknown[]): Promise<VerificationResult> {
	const report = { number: 'TB-0412', revision: 1, code: '8KQ2-7MTR' };
	const record = JSON.stringify({ format: 'noonmark-record/1', report, records });
	const pdf = await signedSample(authority.signer, { record });
	return verifyReport(pdf, { rootPem: authority.root.pem });
}

/** The result with a higher effective temperature, and a hash that fits. */
function forge(): ComputeResult {
	const forged = structuredClone(result);
	const output = forged.outputs.effectiveTemperature;
	if (output === undefined) throw new Error('The method gave no effective temperature.');
	output.value += 1e-9;
	return { ...forged, record: recordHash(request, forged) };
}

beforeAll(async () => {
	authority = await testAuthority();
	result = await compute(request);
});

describe('the attached record', () => {
	it('is computed again to the last bit', async () => {
		const verified = await verify([{ request, result }]);
		expect(verified).toMatchObject({ verdict: 'genuine', record: { recomputed: true, differences: [] } });
		expect(verified.record?.figures).toBeGreaterThan(10);
	});

	it('counts the figures of several records', async () => {
		const one = await verify([{ request, result }]);
		const two = await verify([
			{ request, result },
			{ request, result }
		]);
		expect(two.record?.figures).toBe(2 * (one.record?.figures ?? NaN));
	});

	it('differs where a figure was altered before signing, though its hash was made to fit', async () => {
		const verified = await verify([
			{ request, result },
			{ request, result: forge() }
		]);
		expect(verified).toMatchObject({ verdict: 'record-differs', record: { recomputed: false } });
		expect(verified.signature?.valid).toBe(true);
		const paths = verified.record?.differences.map(({ path }) => path);
		expect(paths).toContain('/records/1/result/outputs/effectiveTemperature/value');
	});

	it('differs where only the hash is another', async () => {
		const wrong = { ...result, record: `sha256:${'0'.repeat(64)}` };
		const verified = await verify([{ request, result: wrong }]);
		expect(verified.verdict).toBe('record-differs');
		expect(verified.record?.differences.length).toBeGreaterThan(0);
	});

	it.each([
		['an unknown method', { ...request, method: 'no-such-method' }],
		['no inputs', { method: 'effective-temperature' }],
		['nothing', {}]
	])('differs where the request is %s', async (_, bad) => {
		const verified = await verify([{ request: bad, result }]);
		expect(verified).toMatchObject({ verdict: 'record-differs', record: { recomputed: false } });
	});

	it.each([
		['another format', { format: 'other/1', report: {}, records: [] }],
		['no JSON', '{'],
		['an array', []]
	])('is none of this service where it is %s', async (_, content) => {
		const record = typeof content === 'string' ? content : JSON.stringify(content);
		const pdf = await signedSample(authority.signer, { record });
		expect((await verifyReport(pdf, { rootPem: authority.root.pem })).verdict).toBe('not-a-report');
	});
});
