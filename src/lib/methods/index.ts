import { effectiveTemperature } from './effective-temperature/method';
import { solarReflectanceIndex } from './solar-reflectance-index/method';
import { sunlitEquilibrium } from './sunlit-equilibrium/method';
import type { Method } from './types';

/** Every method, in the order in which they are offered. A new one is a folder and a line here. */
export const methods: readonly Method[] = [effectiveTemperature, sunlitEquilibrium, solarReflectanceIndex];

const byId = new Map(methods.map((method) => [method.id, method]));

export function methodById(id: string): Method | undefined {
	return byId.get(id);
}
