import type { Columns } from '../types';

/** Stefan-Boltzmann constant as ASTM E1980-11 prints it, W m^-2 K^-4; a standard keeps its own constants. */
export const standardSigma = 5.66961e-8;

/** The two reference surfaces of ASTM E1980-11: solar reflectance, both with the thermal emittance 0.90. */
export const blackReflectance = 0.05;
export const whiteReflectance = 0.8;
export const referenceEmittance = 0.9;

const mostSteps = 100;

/**
 * Surface temperature in K at which absorbed sunlight equals emission to the sky and convection to the air:
 * absorbed = e sigma (T^4 - sky^4) + h (T - air). The left side minus the right falls monotonically in T and the
 * root lies between 0 and `max(air, sky) + absorbed / h`, so Newton's steps are kept inside a shrinking bracket.
 * @returns NaN if the balance is not met to 1e-9 of its largest term.
 */
export function solveBalance(
	absorbed: number,
	emittance: number,
	sky: number,
	air: number,
	h: number
): number {
	const radiating = emittance * standardSigma;
	const skyQuartic = sky * sky * (sky * sky);
	const supply = absorbed + radiating * skyQuartic + h * air;
	let low = 0;
	let high = Math.max(air, sky) + absorbed / h;
	const cube = air * air * air;
	// One linearised step from the air temperature is a start within a few kelvin.
	let t = air + (supply - radiating * cube * air - h * air) / (h + 4 * radiating * cube);
	if (!(t > low && t < high)) t = high;
	for (let step = 0; step < mostSteps; step++) {
		const t3 = t * t * t;
		const excess = radiating * t3 * t + h * t - supply;
		if (excess > 0) high = t;
		else low = t;
		let next = t - excess / (4 * radiating * t3 + h);
		if (!(next >= low && next <= high)) next = (low + high) / 2;
		const moved = Math.abs(next - t);
		t = next;
		if (moved <= 1e-13 * t) break;
	}
	const t2 = t * t;
	const residual = radiating * t2 * t2 + h * t - supply;
	return Math.abs(residual) <= 1e-9 * supply ? t : NaN;
}

/** The fitted form of ASTM E1980-11, valid at the standard's own sunlight, air and sky. */
export function approximateIndex(reflectance: number, emittance: number, h: number): number {
	const x = ((1 - reflectance - 0.029 * emittance) * (8.797 + h)) / (9.5205 * emittance + h);
	return 123.97 - 141.35 * x + 9.655 * x * x;
}

/** Fills surface temperature in K and both forms of the index. */
export function evaluate(inputs: Columns, n: number, out: Record<string, Float64Array>): void {
	const reflectance = inputs.solarReflectance as Float64Array;
	const emittance = inputs.thermalEmittance as Float64Array;
	const irradiance = inputs.irradiance as Float64Array;
	const air = inputs.airTemperature as Float64Array;
	const sky = inputs.skyTemperature as Float64Array;
	const convection = inputs.convectionCoefficient as Float64Array;
	const surface = out.surfaceTemperature as Float64Array;
	const index = out.solarReflectanceIndex as Float64Array;
	const fitted = out.approximateIndex as Float64Array;
	let lastSun = NaN;
	let lastAir = NaN;
	let lastSky = NaN;
	let lastH = NaN;
	let black = NaN;
	let white = NaN;
	for (let i = 0; i < n; i++) {
		const sun = irradiance[i] as number;
		const airNow = air[i] as number;
		const skyNow = sky[i] as number;
		const h = convection[i] as number;
		// The references depend on the surroundings alone, which are often exact.
		if (sun !== lastSun || airNow !== lastAir || skyNow !== lastSky || h !== lastH) {
			black = solveBalance((1 - blackReflectance) * sun, referenceEmittance, skyNow, airNow, h);
			white = solveBalance((1 - whiteReflectance) * sun, referenceEmittance, skyNow, airNow, h);
			lastSun = sun;
			lastAir = airNow;
			lastSky = skyNow;
			lastH = h;
		}
		const r = reflectance[i] as number;
		const e = emittance[i] as number;
		const t = solveBalance((1 - r) * sun, e, skyNow, airNow, h);
		surface[i] = t;
		index[i] = (100 * (black - t)) / (black - white);
		fitted[i] = approximateIndex(r, e, h);
	}
}
