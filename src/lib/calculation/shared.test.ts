import { describe, expect, it } from 'vitest';
import { computeNow } from './index';

const normal = (standardUncertainty: number) => ({ type: 'normal' as const, standardUncertainty });
const plain = {
	method: 'effective-temperature',
	inputs: { bondAlbedo: { value: 0.3, distribution: normal(0.01) } },
	evaluation: { trials: 10_000 }
};

describe('shared quantities', () => {
	it.each(['emissivity', 'irradiance', '__proto__', 'constructor', 'a/b'])(
		'a shared name is no input: "%s" changes nothing',
		(shared) => {
			const named = { ...plain, inputs: { bondAlbedo: { ...plain.inputs.bondAlbedo, shared } } };
			expect(computeNow(named).outputs).toEqual(computeNow(plain).outputs);
		}
	);

	it('are drawn once, listed under the first input, and correlated under either name', () => {
		const temperature = { value: 300, distribution: normal(2), shared: 'surroundings' };
		const roof = (correlations: unknown) =>
			computeNow({
				method: 'solar-reflectance-index',
				inputs: {
					solarReflectance: { value: 0.3, distribution: normal(0.01) },
					thermalEmittance: { value: 0.9 },
					airTemperature: temperature,
					skyTemperature: temperature
				},
				correlations,
				evaluation: { propagation: 'first-order' }
			});
		const pair = (a: string) => [{ a, b: 'solarReflectance', coefficient: 0.5 }];
		const sensitivity = roof([]).outputs.surfaceTemperature?.sensitivity ?? {};
		expect(Object.keys(sensitivity).sort()).toEqual(['airTemperature', 'solarReflectance']);
		expect(roof(pair('skyTemperature')).outputs).toEqual(roof(pair('airTemperature')).outputs);
		expect(() => roof([{ a: 'airTemperature', b: 'skyTemperature', coefficient: 1 }])).toThrow(/itself/);
	});

	it('keep to the domain of every input that reads them', () => {
		// An emissivity of zero is impossible where an albedo of zero is not.
		const share = { value: 0.5, distribution: { type: 'discrete', values: [0, 0.5], weights: [1, 1] } };
		const result = computeNow({
			method: 'effective-temperature',
			inputs: { bondAlbedo: { ...share, shared: 's' }, emissivity: { ...share, shared: 's' } },
			evaluation: { trials: 10_000 }
		});
		expect(result.evaluation.redrawn).toBeGreaterThan(9000);
		expect(result.outputs.absorbedFlux?.standardUncertainty).toBe(0);
	});
});

describe('links', () => {
	it('draw their curves at the best estimates', () => {
		const request = (distribution: object) => ({
			method: 'sunlit-equilibrium',
			inputs: {
				bondAlbedo: { value: 0.1 },
				nightTemperature: {
					from: {
						method: 'effective-temperature',
						inputs: { bondAlbedo: { value: 0.5, distribution } },
						output: 'effectiveTemperature'
					}
				}
			},
			evaluation: { trials: 10_000 }
		});
		const mean = (distribution: object) =>
			computeNow(request(distribution)).series.meansOverAlbedo?.curves.find(
				({ id }) => id === 'wholeSphereMeanTemperature'
			)?.values;
		expect(mean(normal(0.1))).toEqual(mean({ type: 'exact' }));
	});
});

describe('numbers beyond computing', () => {
	const withAlbedo = (distribution: unknown) => ({
		...plain,
		inputs: { bondAlbedo: { value: 0.3, distribution } }
	});
	const claim = { kind: 'claim', output: 'absorbedFlux', value: -1.7e308, standardUncertainty: 1e308 };
	const limit = {
		kind: 'limit',
		output: 'absorbedFlux',
		value: 240,
		sense: 'at-most',
		rule: { type: 'guard-band', risk: 0.05 }
	};
	it.each<[string, unknown, string, string]>([
		[
			'weights that overflow',
			withAlbedo({ type: 'discrete', values: [0.1, 0.5], weights: [1e308, 1e308] }),
			'bad-distribution',
			'/inputs/bondAlbedo/distribution/weights'
		],
		[
			'one possible value that is another',
			withAlbedo({ type: 'discrete', values: [0.5, 0.1], weights: [1, 0] }),
			'bad-distribution',
			'/inputs/bondAlbedo/distribution/values'
		],
		[
			'an endless standard deviation',
			withAlbedo({ type: 'lognormal', geometricStandardDeviation: 1e10 }),
			'bad-distribution',
			'/inputs/bondAlbedo/distribution'
		],
		['an endless difference', { ...plain, compareWith: claim }, 'not-finite', '/compareWith'],
		[
			'a limit without the uncertainty that was stated',
			{ ...plain, evaluation: { propagation: 'none' }, compareWith: limit },
			'uncertainty-needed',
			'/evaluation/propagation'
		]
	])('%s', (_name, request, code, path) => {
		expect(() => computeNow(request)).toThrow(expect.objectContaining({ code, path }) as Error);
	});

	it('are called by their name', () => {
		expect(() =>
			computeNow(JSON.parse('{"method":"effective-temperature","inputs":{"bondAlbedo":{"value":1e999}}}'))
		).toThrow(/Infinity/);
	});
});
