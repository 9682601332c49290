import { describe, expect, it } from 'vitest';
import { computeNow } from '../calculation';
import type { Comparison, ComputeResult, LimitFinding } from '../calculation/types';

const normal = (standardUncertainty: number) => ({ type: 'normal' as const, standardUncertainty });
const codes = (result: ComputeResult) => result.cautions.map(({ code }) => code);

function orrin(compareWith?: Comparison, more: Record<string, unknown> = {}): ComputeResult {
	return computeNow({
		method: 'sunlit-equilibrium',
		inputs: {
			irradiance: { value: 531.6, distribution: normal(1) },
			bondAlbedo: { value: 0.05, distribution: normal(0.01) },
			emissivity: { value: 0.95, distribution: normal(0.005) },
			...more
		},
		evaluation: { trials: 200_000 },
		...(compareWith === undefined ? {} : { compareWith })
	});
}

const claim: Comparison = {
	kind: 'claim',
	value: 38,
	unit: 'degC',
	decimals: 0,
	output: 'subsolarTemperature',
	area: 'point',
	period: 'instant',
	temperatureKind: 'skin'
};

describe('claims', () => {
	it('a stated mean of the whole body is not comparable with the hottest point, whatever the figures', () => {
		const result = orrin({ ...claim, area: 'whole-sphere', period: 'orbit' });
		expect(result.finding).toMatchObject({ kind: 'claim', verdict: 'not-comparable' });
		expect(result.finding?.reasons.length).toBe(2);
		expect(result.cautions.filter(({ level }) => level === 'stop').map(({ code }) => code)).toEqual([
			'area-mismatch',
			'period-mismatch'
		]);
		expect(codes(result)).toContain('above-airless-bound');
	});

	it('like with like is consistent within the expanded uncertainty, in the unit of the claim', () => {
		const { finding } = orrin(claim);
		expect(finding).toMatchObject({
			verdict: 'consistent',
			stated: { unit: 'degC' },
			result: { unit: 'degC' }
		});
		if (finding?.kind !== 'claim') throw new Error('no claim');
		expect(Math.abs(finding.difference)).toBeLessThan(0.1);
		expect(Math.abs(finding.normalisedError ?? NaN)).toBeLessThan(1);
		expect((finding.zetaScore ?? NaN) / (finding.normalisedError ?? NaN)).toBeCloseTo(1.959964, 5);
	});

	it('a number far off is inconsistent', () => {
		const { finding } = orrin({ ...claim, value: 60 });
		expect(finding).toMatchObject({ verdict: 'inconsistent' });
	});

	it('a number that does not say what it averages is compared with a caution', () => {
		const result = orrin({ ...claim, area: 'not-stated', temperatureKind: 'not-stated' });
		expect(result.finding).toMatchObject({ verdict: 'consistent' });
		expect(result.cautions.filter(({ level }) => level === 'caution').map(({ code }) => code)).toEqual(
			expect.arrayContaining(['area-mismatch', 'temperature-kind-mismatch'])
		);
	});

	it('a number that says nothing of what it averages is compared with a caution as well', () => {
		const bare = { kind: 'claim' as const, value: 38, unit: 'degC', output: 'subsolarTemperature' };
		const cautions = orrin(bare).cautions.filter(({ level }) => level === 'caution');
		expect(cautions.map(({ code }) => code)).toEqual(
			expect.arrayContaining(['area-mismatch', 'period-mismatch', 'temperature-kind-mismatch'])
		);
	});

	it('few degrees of freedom widen the expanded uncertainty, and do not make the linear form doubtful', () => {
		const result = computeNow({
			method: 'effective-temperature',
			inputs: { bondAlbedo: { value: 0.3, distribution: { ...normal(0.001), degreesOfFreedom: 3 } } },
			evaluation: { propagation: 'first-order' },
			compareWith: { ...claim, unit: 'K', value: 254.8, decimals: undefined, output: 'effectiveTemperature' }
		});
		const { finding } = result;
		if (finding?.kind !== 'claim') throw new Error('no claim');
		// Quantile of Student's t for 3 degrees of freedom: JCGM 100:2008, table G.2.
		expect((finding.zetaScore ?? NaN) / (finding.normalisedError ?? NaN)).toBeCloseTo(3.18, 2);
		expect(codes(result)).not.toContain('linear-propagation-doubtful');
	});

	it('says where the uncertainty of the result was left out', () => {
		const { finding } = computeNow({
			method: 'sunlit-equilibrium',
			inputs: { bondAlbedo: { value: 0.1, distribution: normal(0.01) } },
			evaluation: { propagation: 'none' },
			compareWith: claim
		});
		expect(finding?.reasons.join(' ')).toContain('No uncertainty was propagated');
	});

	it('too many decimals are noted', () => {
		expect(codes(orrin({ ...claim, decimals: 3 }))).toContain('digits-beyond-uncertainty');
		expect(codes(orrin(claim))).not.toContain('digits-beyond-uncertainty');
	});

	it('an effective temperature is no mean of the ground', () => {
		const result = computeNow({
			method: 'effective-temperature',
			inputs: { bondAlbedo: { value: 0.11, distribution: normal(0.01) } },
			compareWith: {
				...claim,
				value: 270,
				unit: 'K',
				output: 'effectiveTemperature',
				area: 'whole-sphere',
				period: 'orbit'
			}
		});
		expect(result.finding).toMatchObject({ verdict: 'not-comparable' });
		expect(codes(result)).toEqual(
			expect.arrayContaining(['temperature-kind-mismatch', 'effective-read-as-mean'])
		);
	});
});

describe('limits', () => {
	const roof = (
		value: number,
		rule: { type: 'simple-acceptance' } | { type: 'guard-band'; risk: number },
		propagation = 'monte-carlo'
	) =>
		computeNow({
			method: 'solar-reflectance-index',
			inputs: {
				solarReflectance: { value: 0.8, distribution: normal(0.02) },
				thermalEmittance: { value: 0.9 }
			},
			evaluation: { propagation },
			compareWith: { kind: 'limit', value, output: 'solarReflectanceIndex', sense: 'at-least', rule }
		}).finding as LimitFinding;

	it('simple acceptance looks at the estimate, and states the risk', () => {
		expect(roof(99, { type: 'simple-acceptance' })).toMatchObject({
			verdict: 'conforms',
			risk: { kind: 'consumer' }
		});
		expect(roof(102, { type: 'simple-acceptance' }).verdict).toBe('does-not-conform');
		expect(roof(100, { type: 'simple-acceptance' }).probabilityOfConformity).toBeCloseTo(0.5, 1);
	});

	it('a guard band of 5 % is about 1.64 standard uncertainties wide and leaves a gap without verdict', () => {
		const finding = roof(99, { type: 'guard-band', risk: 0.05 });
		expect(finding.verdict).toBe('undecided');
		expect(finding.guardBand / finding.result.standardUncertainty).toBeCloseTo(1.645, 1);
		expect(finding.acceptanceLimit).toBeCloseTo(99 + finding.guardBand, 9);
		expect(roof(94, { type: 'guard-band', risk: 0.05 }).verdict).toBe('conforms');
		expect(roof(106, { type: 'guard-band', risk: 0.05 }).verdict).toBe('does-not-conform');
	});

	it('a limit to a difference of temperatures counts degrees, not from a zero point', () => {
		for (const propagation of ['monte-carlo', 'first-order']) {
			const at = (value: number, unit: string) =>
				computeNow({
					method: 'effective-temperature',
					inputs: {
						bondAlbedo: { value: 0.3 },
						observedTemperature: { value: 288, distribution: normal(1) }
					},
					evaluation: { propagation, trials: 20_000 },
					compareWith: {
						kind: 'limit',
						value,
						unit,
						output: 'temperatureDifference',
						sense: 'at-most',
						rule: { type: 'guard-band', risk: 0.05 }
					}
				}).finding as LimitFinding;
			const kelvin = at(34, 'K');
			for (const [other, size] of [
				[at(34 * 1.8, 'degF'), 1.8],
				[at(34, 'degC'), 1]
			] as const) {
				expect(other.verdict).toBe(kelvin.verdict);
				expect(other.probabilityOfConformity).toBeCloseTo(kelvin.probabilityOfConformity, 3);
				expect(other.result.value).toBeCloseTo(kelvin.result.value * size, 8);
				expect(other.guardBand).toBeCloseTo(kelvin.guardBand * size, 8);
			}
		}
	});

	it('few degrees of freedom leave more beyond a limit', () => {
		const probability = (degreesOfFreedom?: number) =>
			(
				computeNow({
					method: 'solar-reflectance-index',
					inputs: {
						solarReflectance: { value: 0.8, distribution: { ...normal(0.02), degreesOfFreedom } },
						thermalEmittance: { value: 0.9 }
					},
					evaluation: { propagation: 'first-order' },
					compareWith: {
						kind: 'limit',
						value: 95,
						output: 'solarReflectanceIndex',
						sense: 'at-least',
						rule: { type: 'simple-acceptance' }
					}
				}).finding as LimitFinding
			).probabilityOfConformity;
		expect(probability(2)).toBeLessThan(probability() - 0.02);
		expect(probability(1e6)).toBeCloseTo(probability(), 5);
	});

	it('trials and the normal form give nearly the same probability', () => {
		const trials = roof(98, { type: 'simple-acceptance' }).probabilityOfConformity;
		const linear = roof(98, { type: 'simple-acceptance' }, 'first-order').probabilityOfConformity;
		expect(Math.abs(trials - linear)).toBeLessThan(0.01);
	});
});

describe('cautions', () => {
	it('a warm night side is not supplied by the balance', () => {
		expect(codes(orrin(undefined, { nightTemperature: { value: 150, distribution: normal(5) } }))).toContain(
			'night-side-unsupplied'
		);
		expect(codes(orrin(undefined, { nightTemperature: { value: 0 } }))).not.toContain(
			'night-side-unsupplied'
		);
	});

	it('bounds for the mean of an airless body', () => {
		expect(codes(orrin(undefined, { nightTemperature: { value: 300 } }))).toContain('above-airless-bound');
		const observed = (value: number) =>
			codes(
				computeNow({
					method: 'effective-temperature',
					inputs: { bondAlbedo: { value: 0.11 }, observedTemperature: { value } },
					evaluation: { propagation: 'none' }
				})
			);
		expect(observed(288)).toContain('above-airless-bound');
		expect(observed(120)).toContain('below-no-storage-bound');
		expect(observed(200)).not.toContain('above-airless-bound');
		expect(observed(200)).not.toContain('below-no-storage-bound');
		expect(observed(200)).toContain('temperature-kind-mismatch');
	});

	it('an unresolved difference, an old solar constant, a black body, the clouds of the Earth', () => {
		const result = computeNow({
			method: 'effective-temperature',
			inputs: {
				irradiance: { value: 1367 },
				bondAlbedo: { value: 0.306, distribution: normal(0.01) },
				observedTemperature: { value: 255 }
			}
		});
		expect(codes(result)).toEqual(
			expect.arrayContaining(['difference-unresolved', 'irradiance-superseded', 'emissivity-assumed-one'])
		);
		const moon = computeNow({
			method: 'sunlit-equilibrium',
			inputs: { bondAlbedo: { value: 0.3 } },
			evaluation: { propagation: 'none' }
		});
		expect(codes(moon)).toContain('albedo-kind');
	});

	it('a hot roof defers to the standard', () => {
		const roof = computeNow({
			method: 'solar-reflectance-index',
			inputs: { solarReflectance: { value: 0.05 }, thermalEmittance: { value: 0.05 } }
		});
		const hot = roof.cautions.find(({ code }) => code === 'hot-surface');
		expect(hot?.text).toContain('ISO 13732-1');
		expect(codes(roof)).toContain('outside-validity');
	});

	it('a quartic law with a wide emissivity makes the linear form doubtful, a narrow one does not', () => {
		const with_ = (standardUncertainty: number, propagation: string) =>
			codes(
				computeNow({
					method: 'sunlit-equilibrium',
					inputs: {
						bondAlbedo: { value: 0.1 },
						emissivity: { value: 0.6, distribution: normal(standardUncertainty) }
					},
					evaluation: { propagation }
				})
			);
		expect(with_(0.15, 'monte-carlo')).toContain('linear-propagation-doubtful');
		expect(with_(0.15, 'first-order')).toContain('linear-propagation-doubtful');
		expect(with_(0.001, 'monte-carlo')).not.toContain('linear-propagation-doubtful');
	});

	it('a t distribution without a standard deviation is said to have none', () => {
		const with_ = (degreesOfFreedom: number) =>
			computeNow({
				method: 'effective-temperature',
				inputs: {
					irradiance: {
						value: 1361,
						distribution: { type: 'students-t', standardUncertainty: 1, degreesOfFreedom }
					},
					bondAlbedo: { value: 0.3 }
				}
			}).cautions.filter(({ code, level }) => code === 'not-converged' && level === 'caution').length;
		expect(with_(2)).toBe(1);
		expect(with_(3)).toBe(0);
	});

	it('few trials and idle correlations are noted', () => {
		const result = computeNow({
			method: 'sunlit-equilibrium',
			inputs: { bondAlbedo: { value: 0.1, distribution: normal(0.01) } },
			correlations: [{ a: 'bondAlbedo', b: 'emissivity', coefficient: 0.5 }],
			evaluation: { trials: 10_000 }
		});
		expect(codes(result)).toEqual(expect.arrayContaining(['not-converged', 'correlation-ignored']));
	});

	it('every caution says what set it off and on whose word', () => {
		for (const { text, source, code, level } of orrin({ ...claim, area: 'whole-sphere' }).cautions) {
			expect(text).toMatch(/^[A-Z].*\.$/s);
			expect(source, code).toBeTruthy();
			expect(['note', 'caution', 'stop']).toContain(level);
		}
	});
});
