import { attachUnit, formatNumber } from '../quantities';

/** A temperature of a caption in kelvin, one decimal: what a figure says where the reader's scale is not known. */
export function inKelvin(kelvin: number): string {
	return attachUnit(formatNumber(kelvin, 1), 'K');
}
