import { quarterRoot } from '../../exact';
import { stefanBoltzmann } from '../constants';
import type { Columns } from '../types';

/**
 * Local radiative equilibrium on the sunlit side of a sphere: e sigma T^4 = S (1-A) cos(zenith angle), without
 * storage or transport. The area mean of cos^(1/4) over the hemisphere is 4/5. Temperatures in K; the residual in
 * W m^-2 is what a night side at the given temperature emits, per square metre of the whole sphere.
 */
export function evaluate(inputs: Columns, n: number, out: Record<string, Float64Array>): void {
	const irradiance = inputs.irradiance as Float64Array;
	const albedo = inputs.bondAlbedo as Float64Array;
	const emissivity = inputs.emissivity as Float64Array;
	const subsolar = out.subsolarTemperature as Float64Array;
	const sunlit = out.sunlitMeanTemperature as Float64Array;
	const equilibrium = out.equilibriumTemperature as Float64Array;
	for (let i = 0; i < n; i++) {
		const quartic =
			((irradiance[i] as number) * (1 - (albedo[i] as number))) /
			((emissivity[i] as number) * stefanBoltzmann);
		const temperature = quarterRoot(quartic);
		subsolar[i] = temperature;
		sunlit[i] = 0.8 * temperature;
		equilibrium[i] = quarterRoot(quartic / 4);
	}
	const night = inputs.nightTemperature;
	const mean = out.wholeSphereMeanTemperature;
	const quarticMean = out.quarticMeanTemperature;
	const residual = out.energyResidual;
	if (night === undefined || mean === undefined || quarticMean === undefined || residual === undefined)
		return;
	for (let i = 0; i < n; i++) {
		const dark = night[i] as number;
		const darkQuartic = dark * dark * (dark * dark);
		const lit = subsolar[i] as number;
		mean[i] = ((sunlit[i] as number) + dark) / 2;
		// The area mean of T^4 over the sunlit hemisphere is half its value under the Sun.
		quarticMean[i] = quarterRoot((lit * lit * (lit * lit)) / 4 + darkQuartic / 2);
		residual[i] = ((emissivity[i] as number) * stefanBoltzmann * darkQuartic) / 2;
	}
}
