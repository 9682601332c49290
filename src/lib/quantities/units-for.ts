import type { QuantityKind } from '../methods/types';

const units: Record<QuantityKind, readonly string[]> = {
	ratio: ['', '%'],
	temperature: ['K', 'degC', 'degF'],
	'temperature-difference': ['K', 'degF'],
	irradiance: ['W/m^2', 'kW/m^2', 'Btu/(h ft^2)', 'MJ/m^2/day'],
	power: ['W', 'kW', 'MW', 'Btu/h'],
	length: ['m', 'km', 'ft', 'mi', 'au'],
	time: ['s', 'min', 'h', 'd', 'yr'],
	angle: ['deg', 'rad'],
	area: ['m^2', 'ft^2', 'km^2'],
	pressure: ['Pa', 'hPa', 'kPa', 'bar', 'psi'],
	speed: ['m/s', 'km/h', 'ft/s', 'mi/h'],
	'mass-ratio': ['ppm', 'ppb', '%'],
	'heat-transfer-coefficient': ['W/(m^2 K)', 'Btu/(h ft^2 degF)'],
	'daily-irradiation': ['MJ/m^2/day', 'kWh/m^2/day', 'W/m^2'],
	'rate-of-evaporation': ['mm/day', 'in/day'],
	number: [''],
	other: []
};

/** Units that a form may offer for a quantity, the usual one first. */
export function unitsFor(quantity: QuantityKind): string[] {
	return [...units[quantity]];
}
