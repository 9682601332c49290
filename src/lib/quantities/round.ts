import { formatNumber, formatSignificant } from './format';

export interface RoundedResult {
	value: string;
	uncertainty: string;
	/** Decimal places of both; negative where they are rounded to tens or hundreds. */
	decimals: number;
}

/** Decimal places that leave `digits` significant digits of `uncertainty`; undefined for zero. */
export function decimalsFor(uncertainty: number, digits: 1 | 2 = 2): number | undefined {
	if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) return undefined;
	// toExponential carries: 0.0996 to two digits is 1.0e-1, hence two decimals and not three.
	const exponent = Number(uncertainty.toExponential(digits - 1).split('e')[1]);
	return digits - 1 - exponent;
}

/**
 * Value and uncertainty rounded together: the uncertainty to `digits` significant digits and the value to the same
 * decimal place (JCGM 100:2008, 7.2.6). Both in one unit. Without an uncertainty the value keeps six significant
 * digits.
 */
export function roundToUncertainty(value: number, u: number, digits: 1 | 2 = 2): RoundedResult {
	const decimals = decimalsFor(u, digits);
	if (decimals === undefined) {
		const text = formatSignificant(value);
		return { value: text, uncertainty: '0', decimals: text.split('.')[1]?.length ?? 0 };
	}
	return { value: formatNumber(value, decimals), uncertainty: formatNumber(u, decimals), decimals };
}
