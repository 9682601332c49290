import { ferrowCourierWork } from './ferrow-courier';
import { idrisVennWork } from './idris-venn';
import { tallisBrookWork } from './tallis-brook';
import type { DemoDossier } from './types';

/** By the organisation's name. */
export const demoWork: Readonly<Record<string, readonly DemoDossier[]>> = {
	'Tallis Brook Consulting': tallisBrookWork,
	'The Ferrow Courier': ferrowCourierWork,
	'Idris Venn': idrisVennWork
};

export type { DemoCalculation, DemoDossier, DemoReport, DemoReview } from './types';
