/*
 * exp and ln after fdlibm (e_exp.c, e_log.c), with this notice:
 *
 * Copyright (C) 1993 by Sun Microsystems, Inc. All rights reserved.
 * Developed at SunPro, a Sun Microsystems, Inc. business.
 * Permission to use, copy, modify, and distribute this software is freely granted, provided that this notice is
 * preserved.
 *
 * Only operations that ECMAScript defines exactly are used, so every engine gives the same bits.
 */
import { highWord, withHighWord } from './words';

const ln2High = 6.9314718036912381649e-1;
const ln2Low = 1.90821492927058770002e-10;
const inverseLn2 = 1.442695040888963387;
const p1 = 1.66666666666666019037e-1;
const p2 = -2.77777777770155933842e-3;
const p3 = 6.61375632143793436117e-5;
const p4 = -1.6533902205465251539e-6;
const p5 = 4.13813679705723846039e-8;

/** e to the power x, error below 1 unit in the last place. */
export function exp(x: number): number {
	if (Number.isNaN(x)) return x;
	if (x > 709.782712893383973096) return Infinity;
	if (x < -745.13321910194110842) return 0;
	const size = Math.abs(x);
	if (size < 3.725290298461914e-9) return 1 + x;
	let k = 0;
	let high = x;
	let low = 0;
	if (size > 0.34657359027997264) {
		k = size < 1.0397207708399179 ? (x < 0 ? -1 : 1) : Math.trunc(inverseLn2 * x + (x < 0 ? -0.5 : 0.5));
		high = x - k * ln2High;
		low = k * ln2Low;
	}
	const r = high - low;
	const t = r * r;
	const c = r - t * (p1 + t * (p2 + t * (p3 + t * (p4 + t * p5))));
	if (k === 0) return 1 - ((r * c) / (c - 2) - r);
	const y = 1 - (low - (r * c) / (2 - c) - high);
	if (k >= -1021 && k < 1024) return withHighWord(y, (highWord(y) + k * 0x100000) >>> 0);
	if (k >= 1024) return withHighWord(y, (highWord(y) + 1023 * 0x100000) >>> 0) * 2;
	return withHighWord(y, (highWord(y) + (k + 1000) * 0x100000) >>> 0) * 9.3326361850321887899e-302;
}

const l1 = 6.66666666666673513e-1;
const l2 = 3.999999999940941908e-1;
const l3 = 2.857142874366239149e-1;
const l4 = 2.222219843214978396e-1;
const l5 = 1.818357216161805012e-1;
const l6 = 1.531383769920937332e-1;
const l7 = 1.479819860511658591e-1;

/** Natural logarithm, error below 1 unit in the last place; -Infinity at zero, NaN below it. */
export function ln(value: number): number {
	if (value === 0) return -Infinity;
	if (!(value > 0) || value === Infinity) return value === Infinity ? value : NaN;
	let x = value;
	let k = 0;
	if (x < 2.2250738585072014e-308) {
		k = -54;
		x *= 18014398509481984;
	}
	let high = highWord(x);
	k += (high >> 20) - 1023;
	high &= 0xfffff;
	const carry = (high + 0x95f64) & 0x100000;
	x = withHighWord(x, high | (carry ^ 0x3ff00000));
	k += carry >> 20;
	const f = x - 1;
	if ((0xfffff & (2 + high)) < 3) {
		if (f === 0) return k === 0 ? 0 : k * ln2High + k * ln2Low;
		const r = f * f * (0.5 - 0.3333333333333333 * f);
		return k === 0 ? f - r : k * ln2High - (r - k * ln2Low - f);
	}
	const s = f / (2 + f);
	const z = s * s;
	const w = z * z;
	const r = z * (l1 + w * (l3 + w * (l5 + w * l7))) + w * (l2 + w * (l4 + w * l6));
	if (((high - 0x6147a) | (0x6b851 - high)) > 0) {
		const half = 0.5 * f * f;
		if (k === 0) return f - (half - s * (half + r));
		return k * ln2High - (half - (s * (half + r) + k * ln2Low) - f);
	}
	if (k === 0) return f - s * (f - r);
	return k * ln2High - (s * (f - r) - k * ln2Low - f);
}
