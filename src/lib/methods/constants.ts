import type { Citation } from './types';

/** Stefan-Boltzmann constant, W m^-2 K^-4: exact from h, k and c (CODATA 2018, unchanged in 2022). */
export const stefanBoltzmann = 5.670374419e-8;

/** Nominal total solar irradiance at 1 au, W m^-2: IAU 2015 Resolution B3. */
export const nominalSolarIrradiance = 1361;

export const codata: Citation = {
	id: 'codata-2018',
	text: 'Tiesinga, E., Mohr, P. J., Newell, D. B. and Taylor, B. N. (2021): CODATA recommended values of the fundamental physical constants: 2018. Reviews of Modern Physics 93, 025010.',
	doi: '10.1103/RevModPhys.93.025010'
};

export const iauB3: Citation = {
	id: 'iau-2015-b3',
	text: 'International Astronomical Union (2015): Resolution B3 on recommended nominal conversion constants for selected solar and planetary properties. Published by Prša, A. et al. (2016), Astronomical Journal 152, 41.',
	doi: '10.3847/0004-6256/152/2/41'
};
