import type { DemoDossier } from './types';

const sheet = 'Data sheet of the maker, aged sheet, Marrow Metals sheet S-12 (invented)';

const paving = 'Data sheets of the maker, yard pavings P-4 and P-9 (invented)';

export const tallisBrookWork: readonly DemoDossier[] = [
	{
		dossier: {
			title: 'Roof surfaces, Marrow Coast, phase two',
			question:
				'Does the coated sheet proposed for blocks C to F keep a solar reflectance index of at least 82, three years after laying?',
			client: 'Marrow Coast Housing Trust',
			clientContact: 'S. Perrin, asset manager',
			scope: 'The coated sheet as proposed, by the data sheet of its maker. No site measurement.',
			reliance: 'Marrow Coast Housing Trust, for the choice of sheet for blocks C to F.',
			projectNumber: 'MC-2',
			orderNumber: '4500-118'
		},
		calculations: [
			{
				title: 'Coated sheet, aged three years',
				kind: 'test-limit',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.690',
						spread: ['normal', { standardUncertainty: '0.012' }],
						source: {
							kind: 'citation',
							text: sheet,
							valueKind: 'aged',
							spreadMeans: 'standard-uncertainty'
						}
					},
					thermalEmittance: {
						value: '0.880',
						spread: ['normal', { standardUncertainty: '0.010' }],
						source: {
							kind: 'citation',
							text: sheet,
							valueKind: 'aged',
							spreadMeans: 'standard-uncertainty'
						}
					}
				},
				limit: {
					value: '82',
					output: 'solarReflectanceIndex',
					sense: 'at-least',
					rule: 'simple-acceptance',
					source: 'Specification of the Marrow Coast Housing Trust, clause 7.3 (invented)'
				}
			},
			{
				title: 'Red clay tile, for comparison',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.33',
						source: {
							kind: 'citation',
							text: 'LBNL Cool Roofing Materials Database, as printed in The Engineering Guide to LEED - New Construction, table 2.7.3: red clay tile'
						}
					},
					thermalEmittance: {
						value: '0.90',
						source: {
							kind: 'citation',
							text: 'LBNL Cool Roofing Materials Database, as printed in The Engineering Guide to LEED - New Construction, table 2.7.3: red clay tile'
						}
					}
				}
			}
		],
		reports: [
			{
				on: ['Coated sheet, aged three years'],
				title: 'Coated roof sheet, blocks C to F, Marrow Coast',
				background:
					'The Trust asked whether the coated sheet offered for blocks C to F still meets its specification after three years of weather.',
				commentary:
					'The margin above the limit is of the order of the uncertainty. A measurement on the sheets of block A, laid four years ago, would narrow it more than any further calculation.',
				leftOut: 'Soiling beyond what the maker’s ageing test covers, and the effect of standing water.',
				review: {
					by: 'colm.hadley@tallisbrook.example',
					note: 'Please look at the two rows from the data sheet and at the rule for the limit.',
					remarks: [
						{
							on: 'input:solarReflectance',
							body: 'Is this the aged value, or the one of a new sheet?',
							answer: 'Aged three years, second column of the sheet. The source now says so.'
						}
					],
					figure: {
						output: 'solarReflectanceIndex',
						kind: 'lower-bound',
						value: '75',
						unit: '',
						giveOrTake: '',
						averages: 'one site, at one instant',
						route: 'Read off the printed table of the maker for a sheet that is a step darker than this one.'
					},
					decision: {
						kind: 'approved',
						words:
							'I checked both values against the data sheet and computed the record again. I did not visit the site.'
					}
				},
				issue: true
			}
		]
	},
	{
		dossier: {
			title: 'Yard paving, blocks A and B',
			question: 'Which of the two pavings offered for the yards stays cooler in full sun?',
			client: 'Marrow Coast Housing Trust',
			clientContact: 'S. Perrin, asset manager',
			scope: 'Two samples by the data sheets of their maker; no measurement in the yards.',
			reliance: 'Marrow Coast Housing Trust, for the choice of paving.',
			projectNumber: 'MC-3',
			orderNumber: '4500-131'
		},
		calculations: [
			{
				title: 'Pale paving, new',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.46',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: { kind: 'citation', text: paving, valueKind: 'new', spreadMeans: 'standard-uncertainty' }
					},
					thermalEmittance: {
						value: '0.91',
						spread: ['normal', { standardUncertainty: '0.01' }],
						source: { kind: 'citation', text: paving, valueKind: 'new', spreadMeans: 'standard-uncertainty' }
					}
				}
			},
			{
				title: 'Dark paving, new',
				kind: 'find-value',
				method: 'solar-reflectance-index',
				assumptions: {
					solarReflectance: {
						value: '0.14',
						spread: ['normal', { standardUncertainty: '0.02' }],
						source: { kind: 'citation', text: paving, valueKind: 'new', spreadMeans: 'standard-uncertainty' }
					},
					thermalEmittance: {
						value: '0.93',
						spread: ['normal', { standardUncertainty: '0.01' }],
						source: { kind: 'citation', text: paving, valueKind: 'new', spreadMeans: 'standard-uncertainty' }
					}
				}
			}
		],
		reports: [
			{
				on: ['Pale paving, new'],
				title: 'Pale yard paving, blocks A and B',
				background: 'The Trust has two pavings on offer. This memo is on the pale one.',
				commentary:
					'Children play in these yards. Paving in full sun can burn bare skin whatever its index; shade helps more than any paving.',
				leftOut: 'Wear and dirt: both values are of new paving.',
				review: {
					by: 'colm.hadley@tallisbrook.example',
					note: 'The client wants it on Friday. Is the sentence on bare skin plain enough?'
				}
			},
			{
				on: ['Dark paving, new'],
				title: 'Dark yard paving, blocks A and B',
				background: 'The Trust has two pavings on offer. This memo is on the dark one.',
				commentary: 'The dark paving is the cheaper one.',
				leftOut: 'Wear and dirt.',
				review: {
					by: 'colm.hadley@tallisbrook.example',
					note: '',
					remarks: [
						{
							on: 'text.commentary',
							body: 'Price is no part of the question. What does the reader need to know about bare skin?'
						},
						{ on: 'input:solarReflectance', body: 'Which side of the sample was measured, wet or dry?' }
					],
					decision: {
						kind: 'returned',
						words:
							'The commentary speaks of price and not of hot surfaces, and the state of the sample is not said.'
					}
				}
			}
		]
	},
	{
		dossier: {
			title: 'Ground at the landing site',
			question: 'What mean temperature does the sunlit side take if the ground stores no heat?',
			client: 'Coast Aerospace Studio',
			clientContact: '',
			scope: 'Radiative balance of bare ground without an atmosphere; no terrain, no hardware.',
			reliance: 'Coast Aerospace Studio, for early sizing only.',
			projectNumber: '',
			orderNumber: ''
		},
		calculations: [
			{
				title: 'Sunlit side, local balance',
				kind: 'find-value',
				method: 'sunlit-equilibrium',
				temperatureUnit: 'K',
				assumptions: {
					irradiance: {
						value: '1361',
						spread: ['normal', { standardUncertainty: '0.5' }],
						source: {
							kind: 'citation',
							text: 'Kopp, G., & Lean, J. L. (2011). A new, lower value of total solar irradiance: Evidence and climate significance. Geophysical Research Letters, 38, L01706'
						}
					},
					bondAlbedo: {
						value: '0.120',
						spread: ['rectangular', { halfWidth: '0.010' }],
						source: {
							kind: 'judgement',
							text: 'between the darkest and the brightest patch of the site picture'
						}
					},
					emissivity: {
						value: '0.950',
						spread: ['normal', { standardUncertainty: '0.010' }],
						source: {
							kind: 'citation',
							text: 'Hayne, P. O., et al. (2017). Global regolith thermophysical properties of the Moon from the Diviner Lunar Radiometer Experiment. JGR Planets, 122, 2371-2400, table A1'
						}
					}
				}
			},
			{
				title: 'Dark patch, half filled in',
				kind: 'find-value',
				method: 'effective-temperature',
				unfinished: true,
				assumptions: { bondAlbedo: { value: '0,07', source: { kind: null } } }
			}
		],
		reports: [
			{
				on: ['Sunlit side, local balance'],
				title: 'Ground at the landing site, sunlit side',
				background: 'The studio asked for a first figure, before any model of the terrain.',
				commentary:
					'For early sizing only. Hardware needs a model with terrain, time and heat kept in the ground.',
				leftOut: 'Terrain, the heat that the ground keeps, and the heat of the lander itself.',
				review: {
					by: 'colm.hadley@tallisbrook.example',
					note: 'Mostly the averages: is it clear that this is no temperature of one spot?',
					figure: {
						output: 'sunlitMeanTemperature',
						kind: 'upper-bound',
						value: '400',
						unit: 'K',
						giveOrTake: '',
						averages: 'the one spot below the Sun, at one instant',
						route: 'Black ground that faces the Sun squarely and gives away heat by radiation alone, by hand.'
					},
					decision: {
						kind: 'approved',
						words:
							'Inputs and sources checked. The memo says what it averages. Not for hardware, as it says itself.'
					}
				}
			}
		]
	}
];
