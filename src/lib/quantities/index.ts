export { convert, convertDifference } from './convert';
export { displayUnit, superscript, texUnit } from './display-unit';
export {
	attachUnit,
	formatNumber,
	formatSignificant,
	formatWithUnit,
	texNumber,
	texSignificant,
	texWithUnit
} from './format';
export { loadUnits } from './load-units';
export { decimalsFor, roundToUncertainty, type RoundedResult } from './round';
export { unitsFor } from './units-for';
