import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeNow } from '../calculation';
import type { ClaimFinding, ComputeRequest, LimitFinding } from '../calculation/types';
import { methodById } from '../methods';
import type { Method } from '../methods/types';
import {
	answerText,
	averagesSentence,
	driversSentence,
	findingSentences,
	outputsOf,
	outputSpec,
	plainText,
	presentOutput,
	printedDecimals,
	probability,
	share,
	uncertaintyNotes
} from '.';

function method(id: string): Method {
	const found = methodById(id);
	if (!found) throw new Error(`no method ${id}`);
	return found;
}

const sunlit = method('sunlit-equilibrium');
const orrin: ComputeRequest = {
	method: 'sunlit-equilibrium',
	inputs: {
		irradiance: { value: 531.6, unit: 'W/m^2' },
		bondAlbedo: { value: 0.05, distribution: { type: 'normal', standardUncertainty: 0.01 } },
		emissivity: { value: 0.95 }
	},
	evaluation: { trials: 20_000 }
};
const result = computeNow(orrin);

describe('printed digits', () => {
	it('keeps two digits of an uncertainty that begins with 1 or 2, else one', () => {
		expect(printedDecimals(1.66)).toBe(1);
		expect(printedDecimals(0.82)).toBe(1);
		expect(printedDecimals(2.94)).toBe(1);
		expect(printedDecimals(3.02)).toBe(0);
		expect(printedDecimals(0.96)).toBe(1);
		expect(printedDecimals(0)).toBeUndefined();
		expect(printedDecimals(undefined)).toBeUndefined();
	});

	it('prints one or two significant digits of any uncertainty, and the value to the same place', () => {
		const positive = fc.double({ min: 1e-6, max: 1e5, noNaN: true });
		fc.assert(
			fc.property(fc.double({ min: -1e5, max: 1e5, noNaN: true }), positive, (value, u) => {
				const shown = presentOutput(
					{ value, unit: 'W/m^2', standardUncertainty: u },
					{ quantity: 'irradiance' },
					'K'
				);
				const digits = (text: string) => text.replace(/\u00a0W.*$/, '').replace(/[^\d.]/g, '');
				const spread = digits(shown.uncertainty ?? '');
				const decimals = (text: string) => text.split('.')[1]?.length ?? 0;
				expect(decimals(digits(shown.estimate))).toBe(decimals(spread));
				const significant = spread.replace('.', '').replace(/^0+/, '');
				const count = decimals(spread) > 0 ? significant.length : significant.replace(/0+$/, '').length;
				expect(count).toBeGreaterThanOrEqual(1);
				expect(count).toBeLessThanOrEqual(2);
			})
		);
	});

	it('shifts a temperature by the zero of its scale, and its uncertainty not', () => {
		const output = { value: 300, unit: 'K', standardUncertainty: 1 };
		const spec = { quantity: 'temperature' } as const;
		expect(presentOutput(output, spec, 'degC')).toMatchObject({
			estimate: '26.9\u00a0°C',
			uncertainty: '1.0\u00a0K'
		});
		expect(presentOutput(output, spec, 'degF')).toMatchObject({
			estimate: '80.3\u00a0°F',
			uncertainty: '1.8\u00a0°F'
		});
		const difference = presentOutput(output, { quantity: 'temperature-difference' }, 'degC');
		expect(difference.estimate).toBe('300.0\u00a0K');
	});

	it('never prints certainty it has not', () => {
		expect(probability(1)).toBe('more than 99.9\u202f%');
		expect(probability(0)).toBe('less than 0.1\u202f%');
		expect(probability(0.884)).toBe('88\u202f%');
		expect(share(0.004)).toBe('<\u202f1\u202f%');
		expect(share(0)).toBe('0\u202f%');
	});
});

describe('the answer', () => {
	it('names the average, the estimate and the interval with its coverage', () => {
		const text = answerText(sunlit, result, 'sunlitMeanTemperature', { scale: 'degC' });
		expect(text).toMatch(
			/^The sunlit mean temperature is −24\.2\u00a0°C, with a 95\u202f% coverage interval from −25\.\d\u00a0°C to −2[23]\.\d\u00a0°C\.$/
		);
	});

	it('says in the headline where no uncertainty was worked out', () => {
		const none = computeNow({ ...orrin, evaluation: { propagation: 'none' } });
		expect(answerText(sunlit, none, 'sunlitMeanTemperature', { scale: 'K' })).toContain(
			'No uncertainty was worked out.'
		);
		const exact = computeNow({ ...orrin, inputs: { ...orrin.inputs, bondAlbedo: { value: 0.05 } } });
		expect(answerText(sunlit, exact, 'sunlitMeanTemperature', { scale: 'K' })).toContain('taken as exact');
	});

	it('says what is averaged, with the period that the author chose', () => {
		const spec = outputSpec(sunlit, 'sunlitMeanTemperature');
		expect(averagesSentence(spec, { scale: 'K' })).toContain(
			'an average over the sunlit hemisphere, at one instant'
		);
		const yearly = computeNow({ ...orrin, options: { irradiancePeriod: 'orbit' } });
		const named = { ...sunlit, outputs: outputsOf(sunlit, yearly) };
		expect(averagesSentence(outputSpec(named, 'sunlitMeanTemperature'), { scale: 'K' })).toContain(
			'over an orbit'
		);
	});

	it('names what drives the uncertainty', () => {
		expect(driversSentence(sunlit, result, 'sunlitMeanTemperature', { scale: 'K' })).toBe(
			'The Bond albedo causes 100\u202f% of the uncertainty.'
		);
	});

	it('uses no plus-minus sign, which would be read as an interval', () => {
		const notes = uncertaintyNotes(sunlit, orrin, result, 'sunlitMeanTemperature').map(plainText).join(' ');
		expect(notes).not.toMatch(/±|\+\/-/);
		expect(notes).toContain('20\u202f000 trials');
		expect(notes).toContain('“noonmark”');
		expect(notes).toContain('independent');
	});
});

describe('a finding', () => {
	const claim: ClaimFinding = {
		kind: 'claim',
		output: 'sunlitMeanTemperature',
		stated: { value: 38, unit: 'degC' },
		result: { value: -24.2, unit: 'degC', standardUncertainty: 0.8 },
		difference: 62.2,
		differenceUncertainty: 0.8,
		normalisedError: 39.7,
		verdict: 'inconsistent',
		reasons: [
			'Stated minus computed is 62.2 K.',
			'The stated number carries no uncertainty; it is taken as exact.'
		]
	};

	it('tells a difference in kelvin, with its side and score', () => {
		const { heading, reasons } = findingSentences(sunlit, claim, { scale: 'degC' });
		expect(heading).toBe('The stated 38\u00a0°C is inconsistent with the computed sunlit mean temperature.');
		const text = plainText(reasons);
		expect(text).toContain('62.2\u00a0K above the computed one');
		expect(text).toContain('normalised error is 39.70');
		expect(text).toContain('taken as exact');
	});

	it('never speaks of agreement where two things are not comparable', () => {
		const stopped = findingSentences(sunlit, { ...claim, verdict: 'not-comparable' }, { scale: 'degC' });
		const text = `${stopped.heading} ${plainText(stopped.reasons)}`;
		expect(text).toContain('cannot be compared');
		expect(text).not.toMatch(/is consistent|agree|score|normalised error/);
	});

	it('tells a limit with its rule, its source and its risk', () => {
		const finding: LimitFinding = {
			kind: 'limit',
			output: 'sunlitMeanTemperature',
			limit: { value: 260, unit: 'K', sense: 'at-most', source: 'Specification 7, clause 2.' },
			result: { value: 249, unit: 'K', standardUncertainty: 0.8 },
			rule: { type: 'guard-band', risk: 0.05 },
			guardBand: 1.3,
			acceptanceLimit: 258.7,
			probabilityOfConformity: 1,
			risk: { kind: 'consumer', probability: 0 },
			verdict: 'conforms',
			reasons: []
		};
		const { heading, reasons } = findingSentences(sunlit, finding, { scale: 'K' });
		const text = plainText(reasons);
		expect(heading).toBe('The sunlit mean temperature conforms to the limit of at most 260\u00a0K.');
		expect(text).toContain('more than 99.9\u202f%');
		expect(text).toContain('The limit comes from: Specification 7, clause 2.');
		expect(text).toContain('at most 258.7\u00a0K');
		expect(text).toContain('acceptance is wrong is less than 0.1\u202f%');
	});

	it('says on which side of the limit an undecided result lies', () => {
		const undecided = (value: number, probabilityOfConformity: number, sense: 'at-most' | 'at-least') => {
			const finding: LimitFinding = {
				kind: 'limit',
				output: 'sunlitMeanTemperature',
				limit: { value: 260, unit: 'K', sense, source: 'Specification 7, clause 2.' },
				result: { value, unit: 'K', standardUncertainty: 0.8 },
				rule: { type: 'guard-band', risk: 0.05 },
				guardBand: 1.3,
				acceptanceLimit: sense === 'at-most' ? 258.7 : 261.3,
				probabilityOfConformity,
				risk: { kind: 'producer', probability: probabilityOfConformity },
				verdict: 'undecided',
				reasons: []
			};
			return plainText(findingSentences(sunlit, finding, { scale: 'K' }).reasons);
		};
		expect(undecided(259.5, 0.73, 'at-most')).toContain('meets the limit but lies within the guard band');
		expect(undecided(260.3, 0.35, 'at-most')).toContain(
			'lies beyond the limit, but not far enough beyond it'
		);
		expect(undecided(260.3, 0.65, 'at-least')).toContain('meets the limit but lies within the guard band');
		expect(undecided(259.5, 0.27, 'at-least')).toContain(
			'accepting it would be wrong with a probability of 73\u202f% and rejecting it with one of 27\u202f%'
		);
	});
});
