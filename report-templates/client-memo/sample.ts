/** Invented cases that show the memo: a value, a claim, a limit with a hot surface, and one that strains the layout. */
import type { AssumptionDraft, CalculationDraft } from '$lib/calculation/draft';
import { newClaim, newDraft, newLimit } from '$lib/calculation/new-draft';
import { toRequest } from '$lib/calculation/to-request';
import type { ComputeRequest, ComputeResult } from '$lib/calculation/types';
import type { Method } from '$lib/methods/types';
import { emptyReportText, type EvidenceSource, type ReportSource, type RunSource } from '$lib/report';

export interface SampleContext {
	compute: (request: ComputeRequest) => ComputeResult | Promise<ComputeResult>;
	methodOf: (id: string) => Method | undefined;
}

export type Sample = (context: SampleContext) => Promise<ReportSource>;

const sheet: EvidenceSource = {
	id: 'evidence-sheet',
	fileName: 'coated-sheet-data.pdf',
	mediaType: 'application/pdf',
	size: 184_220,
	sha256: '5b1f0c9f6a3e2d714c8b90a5e6f1d2c3b4a5968778695a4b3c2d1e0f9a8b7c6d'
};

function assumption(
	value: string,
	unit: string,
	spread: [AssumptionDraft['spread'], Record<string, string>],
	source: Partial<AssumptionDraft['source']>,
	note = ''
): AssumptionDraft {
	return {
		value,
		unit,
		spread: spread[0],
		spreadValues: spread[1],
		source: { kind: null, text: '', evidenceId: null, ...source },
		note
	};
}

const normal = (standardUncertainty: string): [AssumptionDraft['spread'], Record<string, string>] => [
	'normal',
	{ standardUncertainty }
];
const halfRange = (halfWidth: string): [AssumptionDraft['spread'], Record<string, string>] => [
	'rectangular',
	{ halfWidth }
];
const exact: [AssumptionDraft['spread'], Record<string, string>] = ['exact', {}];

async function run(
	context: SampleContext,
	given: { id: string; title: string; method: string; draft: (method: Method) => CalculationDraft }
): Promise<RunSource> {
	const method = context.methodOf(given.method);
	if (!method) throw new Error(`The method “${given.method}” is not known.`);
	const draft = { ...given.draft(method), method: given.method };
	const { request, faults } = toRequest(draft, method);
	if (!request) throw new Error(`The sample does not read as a request: ${Object.values(faults).join(' ')}`);
	return {
		id: given.id,
		title: given.title,
		draft,
		request,
		result: await context.compute(request),
		engineVersion: '0.1.0',
		nodeVersion: '20.20.2',
		computedAt: '2026-11-27T16:20:00Z'
	};
}

function frame(source: Pick<ReportSource, 'runs'> & Partial<ReportSource>): ReportSource {
	return {
		template: 'client-memo',
		language: 'en-GB',
		organisation: {
			name: 'Tallis Brook Consulting',
			address: ['4 Quay Row', 'Marrow'],
			registrationLine: 'Registered in Marrow, no. 0412',
			contact: 'errors@tallisbrook.example'
		},
		report: {
			number: 'TB-0412',
			revision: 1,
			state: 'issued',
			title: 'Roof surfaces, Marrow Coast, phase two',
			text: emptyReportText
		},
		addressee: { name: 'Marrow Coast Housing Trust', contact: 'S. Perrin' },
		scope: 'One roof sheet, as coated and laid on blocks C to F, by the standard’s own conditions.',
		reliance: '',
		projectNumber: '',
		orderNumber: 'MC-2217',
		author: { name: 'Ada Tallis', role: 'principal consultant' },
		authoriser: { name: 'Ada Tallis', role: 'principal consultant' },
		dates: { inputData: '2026-11-26T10:05:00Z', issue: '2026-11-28T09:30:00Z' },
		verification: {
			address: 'https://noonmark.example/verify',
			code: '8KQ2-7MTR',
			rootFingerprint: '9f2c4be07d61a35810c2ef47b6908d3acb15f0e7249a86d3071be5c4f82a6d90'
		},
		evidence: [sheet],
		review: { kind: 'not-reviewed' },
		history: [{ revision: 1, issuedAt: '2026-11-28T09:30:00Z', reason: '' }],
		...source
	};
}

const orrinAssumptions = {
	irradiance: assumption('531.6', 'W/m^2', exact, {
		kind: 'judgement',
		text: 'the nominal Sun at 1.6 au, the perihelion that the notice gives'
	}),
	bondAlbedo: assumption('0.05', '', normal('0.01'), {
		kind: 'citation',
		text: 'Prospecting notice on Orrin, 2 November 2026, table 1.'
	}),
	emissivity: assumption(
		'0.95',
		'',
		halfRange('0.02'),
		{ kind: 'judgement', text: 'usual for bare rock and soil' },
		'The notice gives none.'
	)
};

const courier = {
	name: 'The Ferrow Courier, science desk',
	address: ['11 Tollgate Street', 'Ferrow'],
	registrationLine: null,
	contact: 'corrections@ferrowcourier.example'
};

const desk = { name: 'Moss Oakes', role: 'science editor' };

/** A value, with nothing to compare it with. */
const value: Sample = async (context) =>
	frame({
		organisation: courier,
		author: desk,
		authoriser: desk,
		report: {
			number: 'FC-0031',
			revision: 1,
			state: 'issued',
			title: 'How warm the sunlit side of Orrin gets',
			text: {
				...emptyReportText,
				question: 'How warm is the sunlit side of the minor planet Orrin at its closest to the Sun?',
				commentary:
					'A reader will take “a mild 38 °C” for the weather of the place. It is one point of it, once in each orbit.'
			}
		},
		addressee: 'none',
		orderNumber: '',
		scope: 'The minor planet Orrin as the notice describes it: a smooth sphere without an atmosphere.',
		runs: [
			await run(context, {
				id: 'run-value',
				title: 'Orrin, sunlit side',
				method: 'sunlit-equilibrium',
				draft: () => ({ ...newDraft('find-value'), assumptions: orrinAssumptions })
			})
		]
	});

/** A claim that averages something else. */
const claim: Sample = async (context) =>
	frame({
		organisation: courier,
		author: desk,
		authoriser: desk,
		report: {
			number: 'FC-0032',
			revision: 2,
			state: 'issued',
			title: 'The “mild 38 °C” of Orrin',
			text: {
				...emptyReportText,
				question:
					'The notice calls Orrin “a mild 38 °C”. Does that hold as the temperature of the whole body?',
				background:
					'The notice was published on 2 November 2026. Asked which temperature is meant, its publisher answered on 9 November: “the temperature of Orrin”.',
				leftOut: 'Whether Orrin rotates, and how fast, was not looked into.'
			}
		},
		addressee: { name: 'Ferrow Courier, news desk', contact: 'R. Lund' },
		orderNumber: '',
		scope: 'The one sentence quoted, with the figures that the notice itself gives.',
		reliance: 'Readers of the published article may rely on it as far as it is quoted in full.',
		history: [
			{ revision: 1, issuedAt: '2026-11-19T15:00:00Z', reason: '' },
			{
				revision: 2,
				issuedAt: '2026-11-28T09:30:00Z',
				reason: 'The publisher’s answer came in.',
				changes: ['Background: the answer is quoted.', 'No figure has changed.']
			}
		],
		runs: [
			await run(context, {
				id: 'run-claim',
				title: 'Orrin, the claim',
				method: 'sunlit-equilibrium',
				draft: (method) => {
					const output =
						method.outputs.find((spec) => spec.id === 'sunlitMeanTemperature') ?? method.outputs[0];
					if (!output) throw new Error('The method gives no output.');
					return {
						...newDraft('check-claim'),
						assumptions: orrinAssumptions,
						claim: {
							...newClaim(output),
							value: '38',
							unit: 'degC',
							area: 'whole-sphere',
							period: 'not-stated',
							temperatureKind: 'not-stated',
							quotation: 'a mild 38 degC',
							citation: 'Prospecting notice on Orrin, 2 November 2026, p. 3'
						}
					};
				}
			})
		]
	});

/** A limit with a guard band, and a surface that people can touch. */
const limit: Sample = async (context) =>
	frame({
		report: {
			number: 'TB-0412',
			revision: 1,
			state: 'issued',
			title: 'Roof surfaces, Marrow Coast, phase two',
			text: {
				...emptyReportText,
				question:
					'Does the coated sheet proposed for blocks C to F keep a solar reflectance index of at least 82, three years after laying?',
				commissionedBy: 'the Marrow Coast Housing Trust'
			}
		},
		runs: [
			await run(context, {
				id: 'run-limit',
				title: 'Coated sheet, aged',
				method: 'solar-reflectance-index',
				draft: (method) => {
					const output =
						method.outputs.find((spec) => spec.id === 'solarReflectanceIndex') ?? method.outputs[0];
					if (!output) throw new Error('The method gives no output.');
					return {
						...newDraft('test-limit'),
						assumptions: {
							solarReflectance: assumption('0.690', '', normal('0.012'), {
								kind: 'file',
								text: 'page 2, line “aged”',
								evidenceId: sheet.id,
								valueKind: 'aged',
								spreadMeans: 'standard-uncertainty'
							}),
							thermalEmittance: assumption('0.880', '', normal('0.010'), {
								kind: 'file',
								text: 'page 2, line “aged”',
								evidenceId: sheet.id,
								valueKind: 'aged',
								spreadMeans: 'standard-uncertainty'
							})
						},
						limit: {
							...newLimit(output),
							value: '82',
							sense: 'at-least',
							rule: 'guard-band',
							risk: '5',
							source: 'Roofing specification of the Trust, edition 3, clause 4.2'
						}
					};
				}
			})
		]
	});

/** A value that somebody else read and approved, with figures of their own by other routes. */
const reviewed: Sample = async (context) => {
	const source = await value(context);
	const by = { name: 'Idris Venn' };
	const route = { runId: 'run-value', output: 'sunlitMeanTemperature', by } as const;
	return {
		...source,
		report: { ...source.report, number: 'FC-0033' },
		review: {
			kind: 'reviewed',
			by: { ...by, role: 'guest reviewer from outside the organisation' },
			at: '2026-11-27T18:40:00Z',
			remarks:
				'I followed each input to its source, computed the record again and found the same figures. The answer says what the result averages.'
		},
		reviewerFigures: [
			{
				...route,
				kind: 'value',
				value: '-25',
				unit: 'degC',
				giveOrTake: '2',
				averages: 'the sunlit hemisphere, at one instant; temperature of the surface itself',
				route: 'Four fifths of the hottest point, read off a chart of black-body temperatures'
			},
			{
				...route,
				kind: 'upper-bound',
				value: '60',
				unit: 'degC',
				giveOrTake: '',
				averages: 'the point right under the Sun, at one instant',
				route: 'A black plate that faces the Sun and loses heat from one side only'
			},
			{
				...route,
				kind: 'value',
				value: '-90',
				unit: 'degC',
				giveOrTake: '',
				averages: '',
				route: 'A figure recalled from a textbook on small bodies'
			}
		]
	};
};

const longWord = 'https://archive.example/'.padEnd(140, 'abcdef0123456789');

/** Long texts, a hostile title, rare characters, two calculations and many notes. */
const strain: Sample = async (context) =>
	frame({
		organisation: {
			name: 'Ångström & Söhne <Partners> “Œuvre” Ltd., Бюро теплотехники, Θερμική Μελέτη',
			address: [
				'1 Very Long Street Name That Goes On and On and On Beyond Any Reasonable Width',
				'Łódź',
				'Ελλάδα'
			],
			registrationLine: 'Registered & regulated; company no. 00000000-ÆØÅ',
			contact: null
		},
		report: {
			number: 'AS-2026/0007',
			revision: 1,
			state: 'issued',
			title:
				'A & B <script>alert(1)</script>: a title that is much longer than any title ought to be, on T ≤ 300 K & ΔT ≈ 5 K',
			text: {
				question: `Is it ≥ 82? ${'And is it so for every one of the many surfaces that were named in the letter? '.repeat(4)}`,
				background: `${'The background is long and goes through everything twice. '.repeat(12)}\n\nA second paragraph with a long address: ${longWord}`,
				answer:
					'An answer in the author’s own words: the surface conforms, by a margin that the rule allows.',
				commentary: `${'An opinion, at length and with √2, ∑ and ∫ in it. '.repeat(14)}`,
				leftOut: 'Dust, birds, moss & lichens; the wind’s gusts; “everything else”.',
				commissionedBy: 'Somebody & Co.',
				withoutAddressee: false
			}
		},
		scope: `${'The scope is given at length. '.repeat(8)}`,
		reliance: 'Whoever is named above.',
		projectNumber: 'P-998877665544332211-ABCDEFGHIJKLMNOPQRSTUVWXYZ',
		temperatureUnit: 'degF',
		runs: [
			await run(context, {
				id: 'run-strain-a',
				title:
					'Sunlit side with every assumption uncertain, and a title that wraps over more than one line of its table',
				method: 'sunlit-equilibrium',
				draft: () => ({
					...newDraft('find-value'),
					assumptions: {
						...orrinAssumptions,
						irradiance: assumption(
							'1361',
							'W/m^2',
							['triangular-bounds', { low: '1350', mode: '1361', high: '1370' }],
							{ kind: 'citation', text: `Somebody, A. B. (2026): A very long title. ${longWord}` },
							'A note that is long enough to wrap within its column, and then wraps once more for good measure.'
						),
						nightTemperature: assumption('-280', 'degF', halfRange('20'), {
							kind: 'judgement',
							text: `a guess from ${longWord}`
						})
					}
				})
			}),
			await run(context, {
				id: 'run-strain-b',
				title: 'Roof',
				method: 'solar-reflectance-index',
				draft: () => ({
					...newDraft('find-value'),
					assumptions: {
						solarReflectance: assumption('0.33', '', halfRange('0.02'), {
							kind: 'citation',
							text: 'A & B (2025), p. 4.'
						}),
						thermalEmittance: assumption('0.90', '', exact, { kind: 'judgement', text: 'as painted' }),
						airTemperature: assumption('98.6', 'degF', normal('2'), { kind: 'judgement', text: 'a hot day' })
					}
				})
			})
		]
	});

export const samples: Readonly<Record<string, Sample>> = { value, claim, limit, strain, reviewed };
