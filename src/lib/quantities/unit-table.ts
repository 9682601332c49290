/**
 * The units that Noonmark knows without help. A value in SI is `(value + shift) * num / den`; numerator and
 * denominator are kept apart so that 57 % is exactly the 0.57 that one would have typed.
 */

/** Exponents of metre, kilogram, second, kelvin, radian, and of anything else (current, amount, light, bits). */
export type Dimension = readonly [number, number, number, number, number, number];

export interface NamedUnit {
	dimension: Dimension;
	num: number;
	den: number;
	/** Zero point of a temperature scale, added before scaling. */
	shift?: number;
	/** Takes SI prefixes. */
	prefixed?: boolean;
	/** How it is printed; its own name if left out. */
	text?: string;
	tex?: string;
}

const none: Dimension = [0, 0, 0, 0, 0, 0];
const length: Dimension = [1, 0, 0, 0, 0, 0];
const area: Dimension = [2, 0, 0, 0, 0, 0];
const volume: Dimension = [3, 0, 0, 0, 0, 0];
const mass: Dimension = [0, 1, 0, 0, 0, 0];
const time: Dimension = [0, 0, 1, 0, 0, 0];
const temperature: Dimension = [0, 0, 0, 1, 0, 0];
const angle: Dimension = [0, 0, 0, 0, 1, 0];
const energy: Dimension = [2, 1, -2, 0, 0, 0];
const power: Dimension = [2, 1, -3, 0, 0, 0];
const pressure: Dimension = [-1, 1, -2, 0, 0, 0];

const unit = (dimension: Dimension, num = 1, den = 1, more: Partial<NamedUnit> = {}): NamedUnit => ({
	dimension,
	num,
	den,
	...more
});

/** British thermal unit (International Table), 1055.05585262 J exactly: ISO 31-4, as mathjs has it. */
const britishThermalUnit = 1055.05585262;

const year = unit(time, 31557600, 1, { text: 'yr' });
const day = unit(time, 86400, 1, { text: 'd' });
const hour = unit(time, 3600, 1, { text: 'h' });
const minute = unit(time, 60, 1, { text: 'min' });
const second = unit(time, 1, 1, { text: 's' });
const foot = unit(length, 3048, 10000, { text: 'ft' });
const celsius = unit(temperature, 1, 1, { shift: 273.15, text: '°C', tex: '{}^\\circ\\mathrm{C}' });
const fahrenheit = unit(temperature, 5, 9, { shift: 459.67, text: '°F', tex: '{}^\\circ\\mathrm{F}' });
const rankine = unit(temperature, 5, 9, { text: '°R', tex: '{}^\\circ\\mathrm{R}' });
const btu = unit(energy, britishThermalUnit, 1, { text: 'Btu' });
// (2 pi / 360), divided out once: the same double that mathjs uses.
const degree = unit(angle, 3.141592653589793, 180, { text: '°', tex: '{}^\\circ' });

export const namedUnits: Readonly<Record<string, NamedUnit>> = Object.assign(
	Object.create(null) as Record<string, NamedUnit>,
	{
		'%': unit(none, 1, 100, { tex: '\\%' }),
		percent: unit(none, 1, 100, { text: '%', tex: '\\%' }),
		ppm: unit(none, 1, 1e6),
		ppb: unit(none, 1, 1e9),
		m: unit(length, 1, 1, { prefixed: true }),
		meter: unit(length, 1, 1, { text: 'm' }),
		metre: unit(length, 1, 1, { text: 'm' }),
		km: unit(length, 1000),
		au: unit(length, 149597870700),
		ft: foot,
		foot,
		feet: foot,
		in: unit(length, 254, 10000),
		inch: unit(length, 254, 10000, { text: 'in' }),
		yd: unit(length, 9144, 10000),
		mi: unit(length, 1609344, 1000),
		mile: unit(length, 1609344, 1000, { text: 'mi' }),
		m2: unit(area, 1, 1, { text: 'm²', tex: 'm^{2}' }),
		sqft: unit(area, 9290304, 100000000, { text: 'ft²', tex: 'ft^{2}' }),
		ha: unit(area, 10000),
		L: unit(volume, 1, 1000, { prefixed: true }),
		l: unit(volume, 1, 1000, { prefixed: true, text: 'L' }),
		g: unit(mass, 1, 1000, { prefixed: true }),
		kg: unit(mass),
		t: unit(mass, 1000),
		lb: unit(mass, 45359237, 100000000),
		s: unit(time, 1, 1, { prefixed: true }),
		sec: second,
		second,
		seconds: second,
		min: minute,
		minute,
		minutes: minute,
		h: hour,
		hr: hour,
		hour,
		hours: hour,
		d: day,
		day,
		days: day,
		yr: year,
		year,
		years: year,
		K: unit(temperature, 1, 1, { prefixed: true }),
		kelvin: unit(temperature, 1, 1, { text: 'K' }),
		degC: celsius,
		celsius,
		degF: fahrenheit,
		fahrenheit,
		degR: rankine,
		rankine,
		rad: unit(angle),
		deg: degree,
		degree,
		degrees: degree,
		J: unit(energy, 1, 1, { prefixed: true }),
		Wh: unit(energy, 3600, 1, { prefixed: true }),
		erg: unit(energy, 1, 1e7),
		cal: unit(energy, 4184, 1000),
		Btu: btu,
		BTU: btu,
		W: unit(power, 1, 1, { prefixed: true }),
		hp: unit(power, 745.6998715386),
		Pa: unit(pressure, 1, 1, { prefixed: true }),
		bar: unit(pressure, 100000, 1, { prefixed: true }),
		atm: unit(pressure, 101325),
		psi: unit(pressure, 6894.75729276459),
		mmHg: unit(pressure, 133.322387415),
		N: unit([1, 1, -2, 0, 0, 0], 1, 1, { prefixed: true })
	}
);

/** SI prefixes as numerator and denominator, with their printed form. */
export const prefixes: Readonly<Record<string, readonly [num: number, den: number, text: string]>> =
	Object.assign(Object.create(null) as Record<string, readonly [number, number, string]>, {
		T: [1e12, 1, 'T'],
		G: [1e9, 1, 'G'],
		M: [1e6, 1, 'M'],
		k: [1e3, 1, 'k'],
		h: [1e2, 1, 'h'],
		da: [1e1, 1, 'da'],
		d: [1, 1e1, 'd'],
		c: [1, 1e2, 'c'],
		m: [1, 1e3, 'm'],
		u: [1, 1e6, 'µ'],
		µ: [1, 1e6, 'µ'],
		n: [1, 1e9, 'n'],
		p: [1, 1e12, 'p']
	});
