import { describe, expect, it } from 'vitest';
import { answerInBrief, methodTitle } from './answer-in-brief';

const plain = (text: string | undefined) => text?.replace(/[\u00a0\u202f]/g, ' ');

describe('answerInBrief', () => {
	it('writes the method’s first answer with its standard uncertainty', () => {
		const outputs = {
			subsolarTemperature: { value: 311.16, unit: 'K', standardUncertainty: 0.94 },
			sunlitMeanTemperature: { value: 248.96, unit: 'K', standardUncertainty: 0.8 }
		};
		const run = { method: 'sunlit-equilibrium', outputs, compared: null };
		expect(plain(answerInBrief({ ...run, scale: 'degC' }))).toBe('−24.2 °C ± 0.8 K');
		expect(plain(answerInBrief({ ...run, scale: 'K' }))).toBe('249.0 ± 0.8 K');
		expect(plain(answerInBrief({ ...run, compared: 'subsolarTemperature', scale: 'K' }))).toBe(
			'311.2 ± 0.9 K'
		);
	});

	it('names a number that has no unit, and writes no uncertainty where none was propagated', () => {
		const outputs = { solarReflectanceIndex: { value: 36.02, unit: '' } };
		const run = { method: 'solar-reflectance-index', outputs, compared: null, scale: null };
		expect(answerInBrief(run)).toMatch(/^SRI 36(\.0\d?)?$/);
	});

	it('says nothing of a method or an output that it does not know', () => {
		expect(answerInBrief({ method: 'unknown', outputs: {}, compared: null, scale: null })).toBeUndefined();
		expect(
			answerInBrief({ method: 'sunlit-equilibrium', outputs: {}, compared: null, scale: 'K' })
		).toBeUndefined();
		expect(methodTitle('unknown')).toBe('unknown');
	});
});
