import type { DemoDossier } from './types';

export const ferrowCourierWork: readonly DemoDossier[] = [
	{
		dossier: {
			title: 'A prospecting notice on Orrin',
			question:
				'The notice calls the minor planet Orrin “a mild 38 degC”. Does that hold, and what does it mean?',
			client: 'The Ferrow Courier, science desk',
			clientContact: 'O. Merrick',
			scope:
				'The notice’s own figures: perihelion 1.6 au, semi-major axis 2.1 au, albedo 0.05, emissivity 0.95.',
			reliance: 'Readers of The Ferrow Courier.',
			projectNumber: '',
			orderNumber: ''
		},
		calculations: [
			{
				title: 'The 38 degC of the notice, read as a mean',
				kind: 'check-claim',
				method: 'sunlit-equilibrium',
				assumptions: {
					irradiance: {
						value: '531.6',
						source: {
							kind: 'judgement',
							text: 'nominal solar irradiance of 1361 W/m^2 (IAU 2015 Resolution B3) at the perihelion of 1.6 au'
						}
					},
					bondAlbedo: {
						value: '0.05',
						spread: ['normal', { standardUncertainty: '0.01' }],
						source: { kind: 'citation', text: 'Prospecting notice on Orrin, page 3 (invented)' }
					},
					emissivity: {
						value: '0.95',
						source: { kind: 'citation', text: 'Prospecting notice on Orrin, page 3 (invented)' }
					}
				},
				claim: {
					value: '38',
					unit: 'degC',
					output: 'sunlitMeanTemperature',
					area: 'point',
					period: 'instant',
					temperatureKind: 'not-stated',
					decimals: '0',
					quotation: 'Orrin keeps a mild 38 degC.',
					citation: 'Prospecting notice on Orrin, page 3 (invented)'
				}
			},
			{
				title: 'Evenly spread warmth at closest approach',
				kind: 'find-value',
				method: 'effective-temperature',
				options: {},
				assumptions: {
					irradiance: {
						value: '531.6',
						source: {
							kind: 'judgement',
							text: 'nominal solar irradiance of 1361 W/m^2 (IAU 2015 Resolution B3) at the perihelion of 1.6 au'
						}
					},
					bondAlbedo: {
						value: '0.05',
						spread: ['normal', { standardUncertainty: '0.01' }],
						source: { kind: 'citation', text: 'Prospecting notice on Orrin, page 3 (invented)' }
					},
					emissivity: {
						value: '0.95',
						source: { kind: 'citation', text: 'Prospecting notice on Orrin, page 3 (invented)' }
					}
				}
			}
		],
		reports: [
			{
				on: ['The 38 degC of the notice, read as a mean'],
				title: 'Orrin’s “mild 38 degC”',
				background:
					'A prospecting notice of this autumn promises a mild minor planet. The desk asked what the figure is.',
				commentary: 'A reader who packs for 38 degC packs for one spot at one moment.',
				leftOut: 'Rotation, heat kept in the ground, and craters.',
				review: {
					by: 'tavi.orme@ferrowcourier.example',
					note: 'Does the answer say what is true of the 38 as well as what is not?',
					remarks: [
						{
							on: 'text.commentary',
							body: 'Good line. Does it hold without an atmosphere at all?',
							answer: 'It does: the notice itself says that there is none.'
						}
					],
					decision: {
						kind: 'approved',
						words: 'Quotation checked against page 3 of the notice. The finding follows from the figures.'
					}
				}
			}
		]
	}
];
