import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeShare } from './compute';
import { compute, computeNow, ProblemError } from './index';
import type { ComputeResult, InputGiven } from './types';

const normal = (standardUncertainty: number) => ({ type: 'normal' as const, standardUncertainty });

const orrin = {
	method: 'sunlit-equilibrium',
	inputs: {
		irradiance: { value: 531.6, unit: 'W/m^2', distribution: normal(1) },
		bondAlbedo: { value: 0.05, distribution: normal(0.01) },
		emissivity: { value: 0.95, distribution: normal(0.02) }
	},
	evaluation: { trials: 20_000, seed: 'orrin' }
};

const output = (result: ComputeResult, id: string): number => result.outputs[id]?.value ?? NaN;
const exactly = (method: string, inputs: Record<string, InputGiven>, options = {}): ComputeResult =>
	computeNow({ method, inputs, options, evaluation: { propagation: 'none' } });

describe('compute', () => {
	it('gives the demo body its temperatures: 38.0 degC under the Sun, -24.2 degC over the sunlit side', () => {
		const result = computeNow(orrin);
		expect(output(result, 'subsolarTemperature') - 273.15).toBeCloseTo(38.0, 1);
		expect(output(result, 'sunlitMeanTemperature') - 273.15).toBeCloseTo(-24.2, 1);
		expect(result.outputs.wholeSphereMeanTemperature).toBeUndefined();
	});

	it('gives the same bytes for the same request, and others for another seed', () => {
		const first = JSON.stringify(computeNow(orrin));
		expect(JSON.stringify(computeNow(structuredClone(orrin)))).toBe(first);
		const other = computeNow({ ...orrin, evaluation: { ...orrin.evaluation, seed: 'other' } });
		expect(other.outputs.subsolarTemperature?.mean).not.toBe(
			(JSON.parse(first) as ComputeResult).outputs.subsolarTemperature?.mean
		);
	});

	it('gives the same figures by blocks with pauses', async () => {
		const request = { ...orrin, evaluation: { trials: 300_000 } };
		let pauses = 0;
		const fractions: number[] = [];
		const paused = await compute(request, {
			pause: async () => void pauses++,
			onProgress: (fraction) => fractions.push(fraction)
		});
		expect(pauses).toBeGreaterThan(1);
		expect(fractions).toEqual([...fractions].sort((a, b) => a - b));
		expect(paused.record).toBe(computeNow(request).record);
	});

	it('gives the same bytes when other threads do blocks of it, in any number of shares', async () => {
		const request = { ...orrin, evaluation: { trials: 123_456, interval: 'shortest' } };
		for (const threads of [1, 2, 5]) {
			const shared = await compute(request, {
				delegate: async (delegation) =>
					Array.from({ length: threads }, (_, first) =>
						structuredClone(computeShare(request, delegation, first, threads))
					)
			});
			expect(JSON.stringify(shared)).toBe(JSON.stringify(computeNow(request)));
		}
	});

	it('lists defaults as such, with their source', () => {
		const { inputs } = exactly('effective-temperature', { bondAlbedo: { value: 0.3 } });
		expect(inputs.irradiance).toMatchObject({ value: 1361, given: false });
		expect(JSON.stringify(inputs.irradiance)).toContain('Resolution B3');
	});

	it('does not care for the unit: percent, degC, degF and kW give the figures of the own units', () => {
		const own = computeNow({
			...orrin,
			inputs: { ...orrin.inputs, nightTemperature: { value: 100, distribution: normal(5) } }
		});
		const others = computeNow({
			...orrin,
			inputs: {
				irradiance: { value: 0.5316, unit: 'kW/m^2', distribution: normal(0.001) },
				bondAlbedo: { value: 5, unit: '%', distribution: normal(1) },
				emissivity: { value: 95, unit: '%', distribution: normal(2) },
				nightTemperature: { value: -279.67, unit: 'degF', distribution: normal(9) }
			}
		});
		for (const [id, { mean, standardUncertainty, interval, sensitivity }] of Object.entries(own.outputs)) {
			const other = others.outputs[id];
			const pairs: [number | undefined, number | undefined][] = [
				[mean, other?.mean],
				[standardUncertainty, other?.standardUncertainty],
				[interval?.low, other?.interval?.low],
				[sensitivity?.bondAlbedo?.coefficient, other?.sensitivity?.bondAlbedo?.coefficient]
			];
			for (const [a, b] of pairs)
				if (a !== undefined) expect(Math.abs((b ?? NaN) - a)).toBeLessThanOrEqual(1e-8 * Math.abs(a));
		}
		expect(others.inputs.nightTemperature).toMatchObject({ unit: 'K', standardUncertainty: 5 });
	});

	it('takes an unusual unit from mathjs', async () => {
		const inputs = { irradiance: { value: 1.361e6, unit: 'erg/(s cm^2)' }, bondAlbedo: { value: 0.3 } };
		const result = await compute({ method: 'effective-temperature', inputs });
		expect(output(result, 'absorbedFlux')).toBeCloseTo((1361 * 0.7) / 4, 6);
	});

	it('closes the energy balance: emission of the evenly warm body is the mean absorbed flux', () => {
		fc.assert(
			fc.property(
				fc.double({ min: 1, max: 10_000, noNaN: true }),
				fc.double({ min: 0, max: 0.99, noNaN: true }),
				fc.double({ min: 0.05, max: 1, noNaN: true }),
				fc.double({ min: 0, max: 100, noNaN: true }),
				(irradiance, albedo, emissivity, internal) => {
					const result = exactly('effective-temperature', {
						irradiance: { value: irradiance },
						bondAlbedo: { value: albedo },
						emissivity: { value: emissivity },
						internalFlux: { value: internal }
					});
					const emitted = emissivity * 5.670374419e-8 * output(result, 'equilibriumTemperature') ** 4;
					expect(Math.abs(emitted / ((irradiance * (1 - albedo)) / 4 + internal) - 1)).toBeLessThan(1e-13);
					expect(output(result, 'equilibriumTemperature')).toBeGreaterThanOrEqual(
						output(result, 'effectiveTemperature') * (1 - 1e-15)
					);
				}
			),
			{ numRuns: 50 }
		);
	});

	it('keeps the order of the means: mean at most the quartic mean, darker is warmer', () => {
		fc.assert(
			fc.property(
				fc.double({ min: 0, max: 0.9, noNaN: true }),
				fc.double({ min: 0.01, max: 0.09, noNaN: true }),
				fc.double({ min: 0, max: 300, noNaN: true }),
				(albedo, more, night) => {
					const at = (value: number) =>
						exactly('sunlit-equilibrium', {
							bondAlbedo: { value },
							nightTemperature: { value: night },
							emissivity: { value: 0.95 }
						});
					const dark = at(albedo);
					const bright = at(albedo + more);
					expect(output(dark, 'wholeSphereMeanTemperature')).toBeLessThanOrEqual(
						output(dark, 'quarticMeanTemperature')
					);
					for (const id of ['subsolarTemperature', 'sunlitMeanTemperature', 'wholeSphereMeanTemperature']) {
						expect(output(bright, id)).toBeLessThan(output(dark, id));
					}
				}
			),
			{ numRuns: 40 }
		);
	});

	it('propagates to first order with t quantiles from stated degrees of freedom', () => {
		const result = computeNow({
			method: 'effective-temperature',
			inputs: { bondAlbedo: { value: 0.3, distribution: { ...normal(0.01), degreesOfFreedom: 4 } } },
			evaluation: { propagation: 'first-order' }
		});
		const { value, standardUncertainty, interval, effectiveDegreesOfFreedom, mean } = result.outputs
			.effectiveTemperature ?? { value: NaN };
		expect(mean).toBeUndefined();
		expect(effectiveDegreesOfFreedom).toBeCloseTo(4, 9);
		expect(((interval?.high ?? NaN) - value) / (standardUncertainty ?? NaN)).toBeCloseTo(2.7764451, 6);
		expect(standardUncertainty).toBeCloseTo((value / 4 / 0.7) * 0.01, 9);
	});

	it('lets shares of uncorrelated inputs sum to one, and correlations change the total', () => {
		const shares = Object.values(computeNow(orrin).outputs.subsolarTemperature?.sensitivity ?? {});
		expect(shares.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 9);
		const correlated = computeNow({
			...orrin,
			correlations: [{ a: 'bondAlbedo', b: 'emissivity', coefficient: -0.9 }]
		});
		expect(correlated.outputs.subsolarTemperature?.standardUncertainty).toBeLessThan(
			computeNow(orrin).outputs.subsolarTemperature?.standardUncertainty ?? 0
		);
	});

	it('draws a trial outside the domain again and counts it', () => {
		const result = computeNow({
			method: 'sunlit-equilibrium',
			inputs: { bondAlbedo: { value: 0.01, distribution: normal(0.02) } },
			evaluation: { trials: 20_000 }
		});
		// A third of the draws of N(0.01, 0.02) lie below zero, and of the new ones again.
		expect(result.evaluation.redrawn).toBeGreaterThan(20_000 * 0.4);
		expect(result.evaluation.redrawn).toBeLessThan(20_000 * 0.5);
	});

	it('propagates links in the same trials: a quantity shared by both cancels', () => {
		const albedo = { value: 0.3, distribution: normal(0.02), shared: 'albedo' };
		const from = {
			method: 'effective-temperature',
			inputs: { irradiance: { value: 1361 }, bondAlbedo: albedo },
			output: 'equilibriumTemperature'
		};
		const linked = computeNow({
			method: 'effective-temperature',
			inputs: { irradiance: { value: 1361 }, bondAlbedo: albedo, observedTemperature: { from } },
			evaluation: { trials: 10_000, outputs: ['temperatureDifference'] }
		});
		expect(linked.outputs.temperatureDifference?.value).toBe(0);
		expect(linked.outputs.temperatureDifference?.standardUncertainty).toBe(0);
		expect(Object.keys(linked.outputs)).toEqual(['temperatureDifference']);
	});

	it('draws a trial again in which a linked quantity is impossible', () => {
		// The residual of a night side at 0 K is zero and never negative; a difference is, in half of the trials.
		const from = {
			method: 'effective-temperature',
			inputs: {
				bondAlbedo: { value: 0.3 },
				observedTemperature: { value: 255, unit: 'K', distribution: normal(1) }
			},
			output: 'temperatureDifference'
		};
		const result = computeNow({
			method: 'sunlit-equilibrium',
			inputs: { bondAlbedo: { value: 0.1 }, nightTemperature: { from } },
			evaluation: { trials: 10_000 }
		});
		expect(result.inputs.nightTemperature).toMatchObject({ given: true, unit: 'K' });
		expect(result.evaluation.redrawn).toBeGreaterThan(1000);
		expect(result.outputs.wholeSphereMeanTemperature?.interval?.low).toBeGreaterThan(
			(result.outputs.sunlitMeanTemperature?.value ?? NaN) / 2
		);
	});

	it('draws a curve for each series, with a band that holds it', () => {
		const { series } = computeNow(orrin);
		expect(Object.keys(series)).toEqual([
			'temperatureOverZenithAngle',
			'meansOverAlbedo',
			'meansOverDistance'
		]);
		for (const { x, curves } of Object.values(series)) {
			for (const { values, low, high } of curves) {
				expect(values.length).toBe(x.values.length);
				values.forEach((value, i) => {
					expect(low?.[i]).toBeLessThanOrEqual(value);
					expect(high?.[i]).toBeGreaterThanOrEqual(value);
				});
			}
		}
		const surface = series.temperatureOverZenithAngle?.curves[0]?.values;
		expect(surface?.at(-1)).toBe(0);
	});
});

describe('faults of a request', () => {
	const base = { method: 'effective-temperature', inputs: { bondAlbedo: { value: 0.3 } } };
	const withInput = (input: unknown) => ({ ...base, inputs: { bondAlbedo: input } });
	const withEvaluation = (evaluation: unknown) => ({ ...base, evaluation });
	it.each<[string, unknown, string, string]>([
		['no object', null, 'wrong-type', ''],
		['unknown method', { ...base, method: 'guess' }, 'unknown-method', '/method'],
		['method of the prototype', { ...base, method: 'constructor' }, 'unknown-method', '/method'],
		['unknown key', { ...base, extra: 1 }, 'unknown-key', '/extra'],
		[
			'unknown input',
			{ ...base, inputs: { bondAlbedo: { value: 0.3 }, mass: { value: 1 } } },
			'unknown-key',
			'/inputs/mass'
		],
		[
			'__proto__',
			{ ...base, inputs: JSON.parse('{"__proto__":{"value":1}}') as unknown },
			'unknown-key',
			'/inputs/__proto__'
		],
		['missing input', { ...base, inputs: {} }, 'missing', '/inputs/bondAlbedo'],
		['null value', withInput({ value: null }), 'not-finite', '/inputs/bondAlbedo/value'],
		['NaN as text', withInput({ value: 'NaN' }), 'not-finite', '/inputs/bondAlbedo/value'],
		['infinity', withInput({ value: Infinity }), 'not-finite', '/inputs/bondAlbedo/value'],
		['text', withInput({ value: '0.3' }), 'wrong-type', '/inputs/bondAlbedo/value'],
		['outside the domain', withInput({ value: 1.2 }), 'outside-domain', '/inputs/bondAlbedo/value'],
		['wrong dimension', withInput({ value: 0.3, unit: 'K' }), 'wrong-dimension', '/inputs/bondAlbedo/unit'],
		['unknown unit', withInput({ value: 0.3, unit: 'parsnip' }), 'unknown-unit', '/inputs/bondAlbedo/unit'],
		[
			'negative uncertainty',
			withInput({ value: 0.3, distribution: normal(-1) }),
			'bad-distribution',
			'/inputs/bondAlbedo/distribution/standardUncertainty'
		],
		[
			'unknown distribution',
			withInput({ value: 0.3, distribution: { type: 'flat' } }),
			'unknown-distribution',
			'/inputs/bondAlbedo/distribution/type'
		],
		[
			'two ways at once',
			withInput({ value: 0.3, distribution: { type: 'rectangular', halfWidth: 1, low: 0 } }),
			'unknown-key',
			'/inputs/bondAlbedo/distribution/low'
		],
		[
			'value outside its own range',
			withInput({ value: 0.3, distribution: { type: 'rectangular', low: 0.4, high: 0.5 } }),
			'bad-distribution',
			'/inputs/bondAlbedo/distribution/low'
		],
		[
			'all draws outside',
			withInput({ value: 0, distribution: { type: 'triangular', low: -1, mode: -0.9, high: 0 } }),
			'outside-domain',
			'/inputs/bondAlbedo/distribution'
		],
		['too few trials', withEvaluation({ trials: 9999 }), 'outside-domain', '/evaluation/trials'],
		['too many trials', withEvaluation({ trials: 1e12 }), 'outside-domain', '/evaluation/trials'],
		['coverage 1', withEvaluation({ coverage: 1 }), 'outside-domain', '/evaluation/coverage'],
		[
			'unknown output',
			withEvaluation({ outputs: ['absorbedFlux', 'mean'] }),
			'unknown-output',
			'/evaluation/outputs/1'
		],
		[
			'Sobol indices',
			withEvaluation({ sensitivity: 'variance-based' }),
			'not-available',
			'/evaluation/sensitivity'
		],
		['solveFor', { ...base, solveFor: {} }, 'not-available', '/solveFor'],
		['half a character', withEvaluation({ seed: '\ud800' }), 'malformed-text', '/evaluation/seed'],
		[
			'unknown option',
			{ ...base, options: { irradiancePeriod: 'century' } },
			'unknown-choice',
			'/options/irradiancePeriod'
		],
		[
			'correlation with itself',
			{ ...base, correlations: [{ a: 'bondAlbedo', b: 'bondAlbedo', coefficient: 1 }] },
			'repeated',
			'/correlations/0/b'
		],
		[
			'correlation above one',
			{ ...base, correlations: [{ a: 'bondAlbedo', b: 'emissivity', coefficient: 2 }] },
			'outside-domain',
			'/correlations/0/coefficient'
		],
		[
			'undetermined comparison',
			{ ...base, compareWith: { kind: 'claim', value: 1, output: 'temperatureDifference' } },
			'undetermined-output',
			'/compareWith/output'
		]
	])('%s', (_name, request, code, path) => {
		let fault: unknown;
		try {
			computeNow(request);
		} catch (thrown) {
			fault = thrown;
		}
		expect(fault).toBeInstanceOf(ProblemError);
		expect(fault).toMatchObject({ code, path });
		expect((fault as Error).message).toMatch(/\S{3}/);
	});

	it('names the pair whose correlation cannot be', () => {
		const uncertain = { distribution: normal(0.01) };
		const request = {
			method: 'sunlit-equilibrium',
			inputs: {
				irradiance: { value: 1361, ...uncertain },
				bondAlbedo: { value: 0.3, ...uncertain },
				emissivity: { value: 0.9, ...uncertain }
			},
			correlations: [
				{ a: 'irradiance', b: 'bondAlbedo', coefficient: 0.9 },
				{ a: 'irradiance', b: 'emissivity', coefficient: 0.9 },
				{ a: 'bondAlbedo', b: 'emissivity', coefficient: -0.9 }
			]
		};
		expect(() => computeNow(request)).toThrow(/between \w+ and emissivity/);
		expect(() => computeNow(request)).toThrow(ProblemError);
	});

	it('takes no random JSON for a request without a plain fault', () => {
		fc.assert(
			fc.property(fc.jsonValue(), (value) => {
				expect(() => computeNow(value)).toThrow(ProblemError);
			})
		);
	});
});
