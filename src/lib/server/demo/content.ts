import type { AssumptionDraft, ClaimDraft, LimitDraft, QuestionKind } from '../../calculation/draft';
import type { DossierInput } from '../../schemas/dossier';

/*
 * What the demo's organisations work on. Clients, products, bodies and files are invented; values from publications
 * name them. Figures are computed when the demo is loaded, never written here.
 */

export interface DemoAssumption {
	value: string;
	unit?: string;
	/** Kind of spread with its parameters; exact where left out. */
	spread?: [AssumptionDraft['spread'], Record<string, string>];
	source: Partial<AssumptionDraft['source']> & { kind: AssumptionDraft['source']['kind'] };
	note?: string;
}

export interface DemoCalculation {
	title: string;
	kind: QuestionKind;
	method: string;
	assumptions: Record<string, DemoAssumption>;
	options?: Record<string, string>;
	claim?: Partial<ClaimDraft>;
	limit?: Partial<LimitDraft>;
	temperatureUnit?: 'K' | 'degC' | 'degF';
	/** Left as a form that somebody is still filling in. */
	unfinished?: boolean;
}

export interface DemoDossier {
	dossier: DossierInput;
	calculations: DemoCalculation[];
	/** A memo on the first calculation: issued, or left a draft. */
	memo?: { title: string; background: string; commentary: string; leftOut: string; issue: boolean };
}

const sheet = 'Data sheet of the maker, aged sheet, Marrow Metals sheet S-12 (invented)';

export const demoWork: Readonly<Record<string, readonly DemoDossier[]>> = {
	'Tallis Brook Consulting': [
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
			memo: {
				title: 'Coated roof sheet, blocks C to F, Marrow Coast',
				background:
					'The Trust asked whether the coated sheet offered for blocks C to F still meets its specification after three years of weather.',
				commentary:
					'The margin above the limit is of the order of the uncertainty. A measurement on the sheets of block A, laid four years ago, would narrow it more than any further calculation.',
				leftOut: 'Soiling beyond what the maker’s ageing test covers, and the effect of standing water.',
				issue: true
			}
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
			]
		}
	],
	'The Ferrow Courier': [
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
			memo: {
				title: 'Orrin’s “mild 38 degC”',
				background:
					'A prospecting notice of this autumn promises a mild minor planet. The desk asked what the figure is.',
				commentary: 'A reader who packs for 38 degC packs for one spot at one moment.',
				leftOut: 'Rotation, heat kept in the ground, and craters.',
				issue: false
			}
		}
	],
	'Idris Venn': [
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
		}
	]
};
