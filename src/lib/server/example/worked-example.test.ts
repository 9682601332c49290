import { describe, expect, it } from 'vitest';
import { workedExample } from './worked-example';

const plain = (text: string | undefined) => text?.replace(/[\u00a0\u202f]/g, ' ');

describe('the worked example of the front page', () => {
	it('computes the hottest point and the mean of the invented minor planet', async () => {
		const example = await workedExample();
		const answer = (id: string) => example.answers.find((one) => one.id === id);
		// 1361 W m-2 at 1.6 au; T = (S (1 - A)/(e sigma))^(1/4) by hand: 311.16 K, and four fifths of it 248.93 K.
		expect(plain(example.irradiance)).toBe('531.6');
		expect(plain(answer('subsolarTemperature')?.value)).toBe('38.0 °C');
		expect(plain(answer('sunlitMeanTemperature')?.value)).toBe('−24.2 °C');
		expect(plain(answer('sunlitMeanTemperature')?.kelvin)).toBe('248.9 K');
		expect(plain(answer('sunlitMeanTemperature')?.uncertainty)).toMatch(/^0\.\d K$/);
		expect(example.record).toMatch(/^sha256:[0-9a-f]{64}$/);
		expect(example.figure.svg).toMatch(/^<svg /);
		expect(example.figure.svgNarrow).not.toBe(example.figure.svg);
		expect(example.figure.table[0]?.cells.length).toBeGreaterThan(10);
	});
});
