/**
 * Which scale a temperature is told on. A point on the scale is shifted, a difference is only scaled: an uncertainty
 * of 1 K is 1.8 degF, never 33.8 degF.
 */
import { convert, convertDifference } from '../quantities';

export type TemperatureScale = 'K' | 'degC' | 'degF';

export function isTemperatureUnit(unit: string): unit is TemperatureScale {
	return unit === 'K' || unit === 'degC' || unit === 'degF';
}

/** Unit of a difference on a scale: differences of degC are told in K. */
export function differenceUnit(scale: TemperatureScale): 'K' | 'degF' {
	return scale === 'degF' ? 'degF' : 'K';
}

/** A temperature on another scale. */
export function temperatureOn(scale: TemperatureScale, value: number, unit: TemperatureScale): number {
	return convert(value, unit, scale);
}

/** A difference or an uncertainty, in the unit of `differenceUnit(scale)`. */
export function temperatureDifferenceOn(
	scale: TemperatureScale,
	value: number,
	unit: TemperatureScale
): number {
	return convertDifference(value, unit, differenceUnit(scale));
}
