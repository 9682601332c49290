import { quarterRoot } from '../../exact';
import { stefanBoltzmann } from '../constants';
import type { Columns } from '../types';

const column = (inputs: Columns, id: string): Float64Array => inputs[id] as Float64Array;

/**
 * Mean absorbed flux S(1-A)/4 in W m^-2 and the temperatures, in K, of a black body and of an evenly warm body of
 * emissivity e that emit it together with the internal flux (Stefan-Boltzmann law).
 */
export function evaluate(inputs: Columns, n: number, out: Record<string, Float64Array>): void {
	const irradiance = column(inputs, 'irradiance');
	const albedo = column(inputs, 'bondAlbedo');
	const emissivity = column(inputs, 'emissivity');
	const internal = column(inputs, 'internalFlux');
	const absorbed = out.absorbedFlux as Float64Array;
	const effective = out.effectiveTemperature as Float64Array;
	const equilibrium = out.equilibriumTemperature as Float64Array;
	for (let i = 0; i < n; i++) {
		const flux = ((irradiance[i] as number) * (1 - (albedo[i] as number))) / 4;
		const emitted = (flux + (internal[i] as number)) / stefanBoltzmann;
		absorbed[i] = flux;
		effective[i] = quarterRoot(emitted);
		equilibrium[i] = quarterRoot(emitted / (emissivity[i] as number));
	}
	const observed = inputs.observedTemperature;
	const difference = out.temperatureDifference;
	if (observed === undefined || difference === undefined) return;
	for (let i = 0; i < n; i++) difference[i] = (observed[i] as number) - (effective[i] as number);
}
