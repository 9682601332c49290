/** Works that the wording itself refers to, whatever the method. */
import type { Citation } from '../methods/types';

export const wordingCitations: readonly Citation[] = [
	{
		id: 'jcgm-100',
		text: 'JCGM 100:2008, Evaluation of measurement data: Guide to the expression of uncertainty in measurement. Joint Committee for Guides in Metrology.',
		url: 'https://www.bipm.org/en/committees/jc/jcgm/publications'
	},
	{
		id: 'jcgm-101',
		text: 'JCGM 101:2008, Evaluation of measurement data: Supplement 1 to the GUM, Propagation of distributions using a Monte Carlo method. Joint Committee for Guides in Metrology.',
		url: 'https://www.bipm.org/en/committees/jc/jcgm/publications'
	},
	{
		id: 'jcgm-106',
		text: 'JCGM 106:2012, Evaluation of measurement data: The role of measurement uncertainty in conformity assessment. Joint Committee for Guides in Metrology.',
		url: 'https://www.bipm.org/en/committees/jc/jcgm/publications'
	},
	{
		id: 'iso-13528',
		text: 'ISO 13528:2022, Statistical methods for use in proficiency testing by interlaboratory comparison. International Organization for Standardization.'
	}
];
