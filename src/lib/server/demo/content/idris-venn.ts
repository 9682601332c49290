import type { DemoDossier } from './types';

export const idrisVennWork: readonly DemoDossier[] = [
	{
		dossier: {
			title: 'Flagstones at the Harbour School',
			question: 'How do two flagstones compare in the sun?',
			client: '',
			clientContact: '',
			scope: '',
			reliance: '',
			projectNumber: '',
			orderNumber: ''
		},
		calculations: [
			{
				title: 'Pale flagstone',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.45',
						spread: ['rectangular', { halfWidth: '0.05' }],
						source: { kind: 'not-sure', text: 'a sample would settle it' }
					},
					thermalEmittance: { value: '0.92', source: { kind: null } }
				}
			}
		]
	},
	{
		dossier: {
			title: 'Play surfaces, Harbour School',
			question: 'How do the three surfaces offered for the play yard compare in full sun?',
			client: 'Harbour School, governors',
			clientContact: 'the bursar',
			scope: 'Three samples by the data sheets of their makers, new. No measurement on site.',
			reliance: 'The governors, for the choice of surface.',
			projectNumber: 'HS-1',
			orderNumber: ''
		},
		calculations: [
			{
				title: 'Sand-coloured granules',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.38',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: {
							kind: 'citation',
							text: 'Data sheet of the maker, granules G-2 (invented)',
							valueKind: 'new',
							spreadMeans: 'standard-uncertainty'
						}
					},
					thermalEmittance: {
						value: '0.90',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: {
							kind: 'citation',
							text: 'Data sheet of the maker, granules G-2 (invented)',
							valueKind: 'new',
							spreadMeans: 'standard-uncertainty'
						}
					}
				}
			},
			{
				title: 'Green granules',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.22',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: {
							kind: 'citation',
							text: 'Data sheet of the maker, granules G-5 (invented)',
							valueKind: 'new',
							spreadMeans: 'standard-uncertainty'
						}
					},
					thermalEmittance: {
						value: '0.90',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: {
							kind: 'citation',
							text: 'Data sheet of the maker, granules G-5 (invented)',
							valueKind: 'new',
							spreadMeans: 'standard-uncertainty'
						}
					}
				}
			},
			{
				title: 'Wood chippings',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.31',
						spread: ['normal', { standardUncertainty: '0.04' }],
						source: {
							kind: 'citation',
							text: 'Data sheet of the maker, chippings W-1 (invented)',
							valueKind: 'new',
							spreadMeans: 'standard-uncertainty'
						}
					},
					thermalEmittance: {
						value: '0.92',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: {
							kind: 'citation',
							text: 'Data sheet of the maker, chippings W-1 (invented)',
							valueKind: 'new',
							spreadMeans: 'standard-uncertainty'
						}
					}
				}
			}
		],
		reports: [
			{
				on: ['Sand-coloured granules'],
				title: 'Sand-coloured granules for the play yard',
				background: 'The first of three surfaces that were offered.',
				commentary:
					'Granules in full sun can burn bare skin. Shade and a hand on the surface before play come first.',
				leftOut: 'Wear, dirt and wet ground.',
				issue: true
			},
			{
				on: ['Green granules'],
				title: 'Green granules for the play yard',
				background: 'The second of three surfaces that were offered.',
				commentary:
					'Granules in full sun can burn bare skin. Shade and a hand on the surface before play come first.',
				leftOut: 'Wear, dirt and wet ground.',
				issue: true
			},
			{
				on: ['Wood chippings'],
				title: 'Wood chippings for the play yard',
				background: 'The last of three surfaces that were offered.',
				commentary: 'Chippings are no flat surface; the index treats them as one.',
				leftOut: 'The air between the chippings, wear, dirt and wet ground.',
				review: {
					by: 'maren.stole@stole-heat.example',
					note: 'You know chippings better than I do. Is it fair to treat them as a flat surface?'
				}
			}
		]
	}
];
