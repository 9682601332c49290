import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	convert,
	convertDifference,
	displayUnit,
	formatNumber,
	formatSignificant,
	formatWithUnit,
	loadUnits,
	roundToUncertainty,
	texUnit,
	unitsFor
} from './index';
import { parseUnit } from './parse-unit';
import type { QuantityKind } from '../methods/types';

describe('units', () => {
	it.each([
		[1, 'kW/m^2', 'W/m^2', 1000],
		[57, '%', '', 0.57],
		[100, 'degC', 'degF', 212],
		[-40, 'degF', 'degC', -40],
		[0, 'degC', 'K', 273.15],
		[1, 'au', 'm', 149597870700],
		[1, 'yr', 'd', 365.25],
		[180, 'deg', 'rad', Math.PI],
		[1, 'MJ/m^2/day', 'W/m^2', 1e6 / 86400],
		[1, 'MJ m^-2 d^-1', 'MJ/m^2/day', 1],
		[1, 'W m^-2 K^-1', 'W/(m^2*K)', 1],
		[4, 's^-0.5', 'min^-0.5', 4 * Math.sqrt(60)],
		[410, 'ppm', 'ppb', 410000],
		[1, 'W/m^2 K', 'W K/m^2', 1],
		[101325, 'Pa', 'hPa', 1013.25]
	])('%s %s is %s %s', (value, from, to, expected) => {
		expect(convert(value, from, to)).toBeCloseTo(expected, 9);
	});

	it('has the British units right: 1 Btu/(h ft2) is 3.154590745 W/m2 (Btu IT and foot of 1959)', () => {
		expect(convert(1, 'Btu/(h ft^2)', 'W/m^2')).toBeCloseTo(3.154590745, 8);
		expect(convert(1, 'Btu/(h ft^2 degF)', 'W/(m^2 K)')).toBeCloseTo(5.678263341, 8);
	});

	it('never shifts a difference', () => {
		expect(convertDifference(9, 'degF', 'K')).toBe(5);
		expect(convertDifference(2, 'degC', 'K')).toBe(2);
	});

	it.each([
		'',
		'W/',
		'/m',
		'W//m',
		'W^',
		'(W',
		'W)',
		'furlongs2',
		'W m^',
		'3 W',
		'__proto__',
		'constructor',
		'm^0.3'
	])('does not take %j for a unit of its own', (text) => {
		expect(text === '' ? undefined : parseUnit(text)).toBeUndefined();
	});

	it('asks mathjs for the rest', async () => {
		await loadUnits(['dyn/cm^2', 'no such unit', 'A', '5 m']);
		expect(convert(1, 'dyn/cm^2', 'Pa')).toBeCloseTo(0.1, 12);
		expect(parseUnit('no such unit')).toBeUndefined();
		expect(parseUnit('5 m')).toBeUndefined();
		expect(() => convert(1, 'A', 'W')).toThrow(RangeError);
	});

	it('goes there and back', () => {
		const kinds: QuantityKind[] = [
			'temperature',
			'irradiance',
			'length',
			'time',
			'angle',
			'pressure',
			'speed'
		];
		fc.assert(
			fc.property(
				fc.constantFrom(...kinds).chain((kind) => {
					const names = unitsFor(kind);
					return fc.tuple(fc.constantFrom(...names), fc.constantFrom(...names));
				}),
				fc.double({ min: -1e6, max: 1e6, noNaN: true }),
				([a, b], value) => {
					const back = convert(convert(value, a, b), b, a);
					expect(Math.abs(back - value)).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(value)));
				}
			)
		);
	});

	it('prints units', () => {
		expect(displayUnit('W/m^2')).toBe('W\u00a0m⁻²');
		expect(displayUnit('degC')).toBe('°C');
		expect(displayUnit('')).toBe('');
		expect(displayUnit('J/(m^2 K s^0.5)')).toBe('J\u00a0m⁻²\u00a0K⁻¹\u00a0s⁻⁰·⁵');
		expect(texUnit('W/m^2')).toBe('\\mathrm{W}\\,\\mathrm{m}^{-2}');
	});
});

describe('numbers', () => {
	it.each([
		[-53.14, 1, '−53.1'],
		[1361, 1, '1361.0'],
		[12345.6, 0, '12\u202f346'],
		[1234567, -2, '1\u202f234\u202f600'],
		[-0.004, 1, '0.0'],
		[0.5, 0, '1'],
		[3e22, 0, '30\u202f000\u202f000\u202f000\u202f000\u202f000\u202f000\u202f000']
	])('%s at %s places', (value, decimals, text) => {
		expect(formatNumber(value, decimals)).toBe(text);
	});

	it('writes very large and small numbers with a power of ten', () => {
		expect(formatSignificant(3.828e26)).toBe('3.828\u00a0×\u00a010²⁶');
		expect(formatSignificant(-5.67e-8)).toBe('−5.67\u00a0×\u00a010⁻⁸');
		expect(formatSignificant(0.306)).toBe('0.306');
		expect(formatSignificant(1234567.8)).toBe('1\u202f234\u202f568');
	});

	it('sets units behind numbers', () => {
		expect(formatWithUnit(38, 1, 'degC')).toBe('38.0\u00a0°C');
		expect(formatWithUnit(30, 0, '%')).toBe('30\u202f%');
		expect(formatWithUnit(45, 0, 'deg')).toBe('45°');
		expect(formatWithUnit(0.3, 2, '')).toBe('0.30');
	});

	it.each([
		[255.14159, 0.5234, '255.14', '0.52', 2],
		[255.14159, 0.0996, '255.14', '0.10', 2],
		[1234567, 4321, '1\u202f234\u202f600', '4300', -2],
		[0.1, 9.96, '0', '10', 0],
		[311.12, 0, '311.12', '0', 2]
	])('rounds %s by %s', (value, u, text, uncertainty, decimals) => {
		expect(roundToUncertainty(value, u)).toEqual({ value: text, uncertainty, decimals });
	});

	it('keeps one or two digits of the uncertainty, and the value at the same place', () => {
		const plain = (text: string) => text.replaceAll('\u202f', '').replace('−', '-');
		fc.assert(
			fc.property(
				fc.double({ min: -1e9, max: 1e9, noNaN: true }),
				fc.double({ min: 1e-9, max: 1e9, noNaN: true }),
				fc.constantFrom<1 | 2>(1, 2),
				(value, u, digits) => {
					const rounded = roundToUncertainty(value, u, digits);
					const shown = plain(rounded.uncertainty);
					const trimmed = shown.replace('.', '').replace(/^0+/, '');
					expect((rounded.decimals < 0 ? trimmed.slice(0, rounded.decimals) : trimmed).length).toBe(digits);
					expect(Math.abs(Number(shown) - u)).toBeLessThanOrEqual(u * (digits === 2 ? 0.0501 : 0.501));
					const places = Math.max(0, rounded.decimals);
					expect(plain(rounded.value).split('.')[1]?.length ?? 0).toBe(places);
					let half = 0.5000001;
					for (let i = 0; i < Math.abs(rounded.decimals); i++)
						half = rounded.decimals > 0 ? half / 10 : half * 10;
					expect(Math.abs(Number(plain(rounded.value)) - value)).toBeLessThanOrEqual(
						half + Math.abs(value) * 1e-15
					);
				}
			)
		);
	});
});
