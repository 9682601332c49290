/** Numbers of a result as they are printed: rounded from their uncertainty, on the scale that the reader wants. */
import type { OutputResult } from '../calculation/types';
import type { OutputSpec } from '../methods/types';
import { attachUnit, decimalsFor, displayUnit, formatNumber, formatSignificant } from '../quantities';
import {
	differenceUnit,
	isTemperatureUnit,
	temperatureDifferenceOn,
	temperatureOn,
	type TemperatureScale
} from './temperature';

export interface PresentedOutput {
	/** The estimate with its unit: "−24.2 °C". */
	estimate: string;
	/** The estimate without its unit, and the unit as printed. */
	number: string;
	unit: string;
	decimals: number;
	/** Standard uncertainty with its unit: "0.8 K"; left out where none was propagated. */
	uncertainty?: string;
	/** Ends of the coverage interval with their unit, rounded as the estimate is. */
	low?: string;
	high?: string;
	coverage?: string;
	/** The method at the best estimates, where it prints differently from the mean of the trials. */
	atBestEstimates?: string;
}

/**
 * Decimal places of a value and its standard uncertainty: the uncertainty keeps two significant digits where its
 * first is printed as 1 or 2, else one. JCGM 100:2008, 7.2.6 allows up to two; a second digit behind a 3 or more
 * would claim an uncertainty that is itself better known than inputs make it. Undefined without an uncertainty.
 */
export function printedDecimals(uncertainty: number | undefined): number | undefined {
	if (uncertainty === undefined || !(uncertainty > 0)) return undefined;
	const [two = '9.9'] = uncertainty.toExponential(1).split('e');
	if (Number(two) < 3) return decimalsFor(uncertainty, 2);
	const decimals = decimalsFor(uncertainty, 1);
	/* 0.96 rounds to 1 and is then printed as 1.0. */
	const carried = uncertainty.toExponential(0).startsWith('1');
	return decimals === undefined ? undefined : carried ? decimals + 1 : decimals;
}

/** "95 %", "99.7 %". */
export function percent(fraction: number, digits = 3): string {
	return attachUnit(formatSignificant(Number((fraction * 100).toPrecision(digits)), digits), '%');
}

/** A probability without false certainty: never 0 % or 100 %. */
export function probability(value: number): string {
	if (value > 0.999) return 'more than ' + percent(0.999);
	if (value < 0.001) return 'less than ' + percent(0.001);
	return percent(value, value > 0.99 || value < 0.1 ? 3 : 2);
}

/** A share of the whole: whole per cent, "< 1 %" instead of a nought that is none. */
export function share(value: number): string {
	if (value <= 0) return attachUnit('0', '%');
	if (value < 0.01) return `<\u202f${attachUnit('1', '%')}`;
	return attachUnit(formatNumber(value * 100, 0), '%');
}

/** A difference in an output's unit, rounded by its own uncertainty. */
export function presentDifference(
	value: number,
	unit: string,
	uncertainty: number | undefined,
	scale: TemperatureScale
): { value: string; uncertainty?: string } {
	const temperature = isTemperatureUnit(unit);
	const own = temperature ? temperatureDifferenceOn(scale, value, unit) : value;
	const u =
		uncertainty === undefined
			? undefined
			: temperature
				? temperatureDifferenceOn(scale, uncertainty, unit)
				: uncertainty;
	const printedUnit = temperature ? differenceUnit(scale) : unit;
	const decimals = printedDecimals(u);
	const text = (n: number) => (decimals === undefined ? formatSignificant(n, 4) : formatNumber(n, decimals));
	return {
		value: attachUnit(text(own), printedUnit),
		...(u !== undefined && u > 0 ? { uncertainty: attachUnit(text(u), printedUnit) } : {})
	};
}

/** A stated number in the unit it was stated in, or a temperature on the wanted scale where it was given in kelvin. */
export function presentStated(value: number, unit: string): string {
	return attachUnit(formatSignificant(value, 10), unit);
}

/**
 * An output as it is printed. A Monte Carlo result states the mean of the trials as its estimate (JCGM 101:2008,
 * 7.6), any other the value at the best estimates.
 */
export function presentOutput(
	output: OutputResult,
	spec: Pick<OutputSpec, 'quantity'>,
	scale: TemperatureScale
): PresentedOutput {
	const { unit } = output;
	const temperature = isTemperatureUnit(unit);
	const difference = spec.quantity === 'temperature-difference';
	const onScale = (value: number): number => {
		if (!temperature) return value;
		return difference ? temperatureDifferenceOn(scale, value, unit) : temperatureOn(scale, value, unit);
	};
	const printedUnit = temperature ? (difference ? differenceUnit(scale) : scale) : unit;
	const spread =
		output.standardUncertainty === undefined
			? undefined
			: temperature
				? temperatureDifferenceOn(scale, output.standardUncertainty, unit)
				: output.standardUncertainty;
	const decimals = printedDecimals(spread);
	const text = (value: number) =>
		decimals === undefined ? formatSignificant(value) : formatNumber(value, decimals);
	const number = text(onScale(output.mean ?? output.value));
	const best = text(onScale(output.value));
	return {
		estimate: attachUnit(number, printedUnit),
		number,
		unit: displayUnit(printedUnit),
		decimals: decimals ?? number.split('.')[1]?.length ?? 0,
		...(spread !== undefined && spread > 0
			? { uncertainty: attachUnit(text(spread), temperature ? differenceUnit(scale) : unit) }
			: {}),
		...(output.interval && decimals !== undefined
			? {
					low: attachUnit(text(onScale(output.interval.low)), printedUnit),
					high: attachUnit(text(onScale(output.interval.high)), printedUnit),
					coverage: percent(output.interval.coverage)
				}
			: {}),
		...(best === number ? {} : { atBestEstimates: attachUnit(best, printedUnit) })
	};
}
