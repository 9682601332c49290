import type { Area, Period, TemperatureKind } from '../calculation/types';

/* What a number averages, in words. */

export const areaWords: Readonly<Record<Area, string>> = {
	point: 'one point',
	'sunlit-hemisphere': 'the sunlit half',
	'whole-sphere': 'the whole sphere',
	site: 'one site',
	'not-stated': 'area not stated'
};

export const periodWords: Readonly<Record<Period, string>> = {
	instant: 'one moment',
	day: 'one day',
	year: 'one year',
	orbit: 'one orbit',
	'not-stated': 'period not stated'
};

export const temperatureKindWords: Readonly<Record<TemperatureKind, string>> = {
	effective: 'effective temperature',
	equilibrium: 'equilibrium temperature',
	skin: 'surface temperature',
	radiometric: 'radiometric temperature',
	'air-2m': 'air temperature at 2 m',
	'not-stated': 'kind not stated'
};
