/*
 * sin and cos after fdlibm (k_sin.c, k_cos.c and the reduction by three parts of pi/2), with this notice:
 *
 * Copyright (C) 1993 by Sun Microsystems, Inc. All rights reserved.
 * Developed at SunPro, a Sun Microsystems, Inc. business.
 * Permission to use, copy, modify, and distribute this software is freely granted, provided that this notice is
 * preserved.
 */
export const pi = 3.141592653589793;

const s1 = -1.66666666666666324348e-1;
const s2 = 8.33333333332248946124e-3;
const s3 = -1.98412698298579493134e-4;
const s4 = 2.75573137070700676789e-6;
const s5 = -2.50507602534068634195e-8;
const s6 = 1.58969099521155010221e-10;
const c1 = 4.16666666666666019037e-2;
const c2 = -1.38888888888741095749e-3;
const c3 = 2.48015872894767294178e-5;
const c4 = -2.75573143513906633035e-7;
const c5 = 2.0875723212981748279e-9;
const c6 = -1.13596475577881948265e-11;

/** Sine of x + tail for |x| up to pi/4. */
function sineKernel(x: number, tail: number): number {
	const z = x * x;
	const v = z * x;
	const r = s2 + z * (s3 + z * (s4 + z * (s5 + z * s6)));
	return x - (z * (0.5 * tail - v * r) - tail - v * s1);
}

/** Cosine of x + tail for |x| up to pi/4. */
function cosineKernel(x: number, tail: number): number {
	const z = x * x;
	const r = z * (c1 + z * (c2 + z * (c3 + z * (c4 + z * (c5 + z * c6)))));
	const half = 0.5 * z;
	const w = 1 - half;
	return w + (1 - w - half + (z * r - x * tail));
}

const twoOverPi = 6.36619772367581382433e-1;
const halfPi1 = 1.57079632673412561417;
const halfPi2 = 6.0771005063039659766e-11;
const halfPi3 = 2.0222662487111664558e-21;
const halfPi3Tail = 8.47842766036889956997e-32;

/** Largest angle in radians for which the reduction keeps all digits. */
const largest = 1e5;

function reduced(x: number, quarterTurns: 0 | 1): number {
	if (!(Math.abs(x) <= largest)) return NaN;
	const n = Math.round(x * twoOverPi);
	let high = x - n * halfPi1;
	let next = n * halfPi2;
	let before = high;
	high -= next;
	next = n * halfPi2 - (before - high);
	before = high;
	const third = n * halfPi3;
	high = before - (next + third);
	const tail = before - high - (next + third) - n * halfPi3Tail;
	switch ((((n % 4) + 4) % 4) + quarterTurns) {
		case 0:
		case 4:
			return sineKernel(high, tail);
		case 1:
			return cosineKernel(high, tail);
		case 2:
			return -sineKernel(high, tail);
		default:
			return -cosineKernel(high, tail);
	}
}

/** Sine of an angle in radians up to 1e5 either way; NaN beyond. */
export function sin(x: number): number {
	return Math.abs(x) <= 0.7853981633974483 ? sineKernel(x, 0) : reduced(x, 0);
}

/** Cosine of an angle in radians up to 1e5 either way; NaN beyond. */
export function cos(x: number): number {
	return Math.abs(x) <= 0.7853981633974483 ? cosineKernel(x, 0) : reduced(x, 1);
}
