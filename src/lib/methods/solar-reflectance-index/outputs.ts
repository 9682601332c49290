import type { OutputSpec } from '../types';

export const outputs: readonly OutputSpec[] = [
	{
		id: 'solarReflectanceIndex',
		symbol: '\\mathrm{SRI}',
		name: 'solar reflectance index',
		label: 'Solar reflectance index',
		quantity: 'number',
		unit: '',
		area: 'site',
		period: 'instant',
		primary: true
	},
	{
		id: 'surfaceTemperature',
		symbol: 'T_\\mathrm{s}',
		name: 'surface temperature',
		label: 'Surface temperature under the standard Sun',
		quantity: 'temperature',
		unit: 'K',
		area: 'site',
		period: 'instant',
		temperatureKind: 'skin',
		primary: true
	},
	{
		id: 'approximateIndex',
		symbol: '\\mathrm{SRI}_\\mathrm{fit}',
		name: 'solar reflectance index, fitted form',
		label: 'Index by the fitted form of the standard',
		quantity: 'number',
		unit: '',
		area: 'site',
		period: 'instant'
	}
];
