/**
 * Every sentence that a result is told in, in one place. Another language is another object of this shape; numbers
 * arrive already formatted.
 */
import type { Area, Period, TemperatureKind } from '../calculation/types';
import { cite, strong, type Phrase, type PhrasePart } from './phrase';

const areas: Record<Area, string> = {
	point: 'a point',
	'sunlit-hemisphere': 'the sunlit hemisphere',
	'whole-sphere': 'the whole sphere',
	site: 'one site',
	'not-stated': 'an area that is not stated'
};

const periods: Record<Period, string> = {
	instant: 'at one instant',
	day: 'over a day',
	year: 'over a year',
	orbit: 'over an orbit',
	'not-stated': 'over a period that is not stated'
};

const temperatureKinds: Record<TemperatureKind, string> = {
	effective: 'effective temperature',
	equilibrium: 'equilibrium temperature',
	skin: 'temperature of the surface itself',
	radiometric: 'radiometric temperature',
	'air-2m': 'air temperature at 2 m',
	'not-stated': 'temperature of a kind that is not stated'
};

export const britishEnglish = {
	language: 'en-GB',
	and: 'and',
	areas,
	periods,
	temperatureKinds,

	/** Headline with a propagated uncertainty; `name` is the trade's term in lower case. */
	answer: (name: string, estimate: string): Phrase => [`The ${name} is `, strong(estimate)],
	answerInterval: (low: string, high: string, coverage: string): string =>
		`, with a ${coverage} coverage interval from ${low} to ${high}.`,
	answerSpread: (uncertainty: string): string => `, with a standard uncertainty of ${uncertainty}.`,
	/** Said in the headline itself, so that nobody takes the number for exact. */
	answerWithoutUncertainty: '. No uncertainty was worked out.',
	answerExact: '. All its inputs are taken as exact, so no uncertainty is stated.',
	intervalLine: (coverage: string, low: string, high: string): string =>
		`${coverage} interval ${low} to ${high}`,
	standardUncertainty: (uncertainty: string): string => `Its standard uncertainty is ${uncertainty}.`,
	atBestEstimates: (value: string): string =>
		`At the best estimates alone the method gives ${value}; the estimate stated is the mean of the trials.`,

	averagesOver: (area: Area, period: Period): string =>
		area === 'point'
			? `It holds for ${areas.point}, ${periods[period]}; it is not an average over an area.`
			: area === 'site'
				? `It holds for ${areas.site}, ${periods[period]}.`
				: `It is an average over ${areas[area]}, ${periods[period]}.`,
	kindOfTemperature: (kind: TemperatureKind): string => `It is the ${temperatureKinds[kind]}.`,
	appliesOnly: 'It applies to the case described here and to no other.',

	driver: (name: string, share: string): string => `the ${name} causes ${share} of the uncertainty`,
	driverFollowing: (name: string, share: string): string => `the ${name} ${share}`,
	driversRest: 'every other input less',
	driversNone: 'No input carries an uncertainty.',
	sharesAreOfVariance: (): Phrase => [
		'Shares are of the variance, the square of the standard uncertainty, to first order ',
		cite('jcgm-100'),
		'.'
	],

	claim: {
		consistent: (stated: string, name: string): string =>
			`The stated ${stated} is consistent with the computed ${name}.`,
		inconsistent: (stated: string, name: string): string =>
			`The stated ${stated} is inconsistent with the computed ${name}.`,
		'not-comparable': (stated: string, name: string): string =>
			`The stated ${stated} cannot be compared with the computed ${name}.`,
		statedAndComputed: (
			stated: string,
			name: string,
			computed: string,
			uncertainty: string | undefined
		): Phrase => [
			'Stated is ',
			strong(stated),
			`; computed is a ${name} of `,
			strong(computed),
			uncertainty ? ` with a standard uncertainty of ${uncertainty}.` : '.'
		],
		difference: (size: string, above: boolean, uncertainty: string | undefined): string =>
			`The stated value lies ${size} ${above ? 'above' : 'below'} the computed one` +
			(uncertainty ? `; the standard uncertainty of that difference is ${uncertainty}.` : '.'),
		noDifference: 'At the digits printed there is no difference.',
		differenceNoAgreement:
			'The difference is given for information: the two average different things, so it neither supports nor refutes the statement.',
		score: (name: 'E_n' | 'zeta', value: string): Phrase =>
			name === 'E_n'
				? [
						`The normalised error is ${value}; up to 1 in size, the two are consistent within their expanded uncertainties `,
						cite('iso-13528'),
						'.'
					]
				: [`The zeta score is ${value}; up to 2 in size, it is satisfactory `, cite('iso-13528'), '.']
	},

	limit: {
		sense: { 'at-most': 'at most', 'at-least': 'at least' },
		conforms: (name: string, limit: string): string => `The ${name} conforms to the limit of ${limit}.`,
		'does-not-conform': (name: string, limit: string): string =>
			`The ${name} does not conform to the limit of ${limit}.`,
		undecided: (name: string, limit: string): string =>
			`Whether the ${name} conforms to the limit of ${limit} cannot be stated.`,
		probability: (computed: string, sense: string, limit: string, probability: string): Phrase => [
			'The result is ',
			strong(computed),
			`; the probability that the true value is ${sense} ${limit} is `,
			strong(probability),
			' ',
			cite('jcgm-106'),
			'.'
		],
		source: (source: string): string => `The limit comes from: ${source}.`,
		simpleAcceptance:
			'Decision rule: simple acceptance. The result is accepted where its estimate meets the limit, whatever its uncertainty.',
		guardBand: (risk: string, band: string, acceptance: string): string =>
			`Decision rule: guard band. The result is accepted where its estimate meets ${acceptance}, that is the limit moved inwards by ${band}, so that the probability of accepting wrongly stays at or below ${risk}.`,
		consumerRisk: (risk: string): string => `The probability that this acceptance is wrong is ${risk}.`,
		producerRisk: (risk: string): string => `The probability that this rejection is wrong is ${risk}.`,
		undecidedRisk: (meetsLimit: boolean, accepting: string, rejecting: string): string =>
			`The estimate ${meetsLimit ? 'meets the limit but lies within the guard band' : 'lies beyond the limit, but not far enough beyond it'}: accepting it would be wrong with a probability of ${accepting} and rejecting it with one of ${rejecting}, both more than the rule allows.`
	},

	uncertainty: {
		none: (): Phrase => ['No uncertainty was propagated: the figures are those of the best estimates alone.'],
		exact: (): Phrase => [
			'Every input was taken as exact, so the figures carry no uncertainty; what the inputs may really be is not covered.'
		],
		monteCarlo: (trials: string, seed: string): Phrase => [
			`Uncertainty was propagated by drawing the inputs from their distributions in ${trials} trials `,
			cite('jcgm-101'),
			`, from random numbers that the text “${seed}” fixes. The estimate is the mean of the trials and the standard uncertainty their standard deviation. The same request gives the same figures to the last bit.`
		],
		firstOrder: (): Phrase => [
			'Uncertainty was propagated to first order from standard uncertainties and partial derivatives ',
			cite('jcgm-100'),
			'. The estimate is the method at the best estimates.'
		],
		symmetric: (coverage: string): string =>
			`The ${coverage} coverage interval is probabilistically symmetric: equal parts of the trials lie below and above it. It need not be centred on the estimate.`,
		shortest: (coverage: string): string =>
			`The ${coverage} coverage interval is the shortest that holds that share of the trials. It need not be centred on the estimate.`,
		coverageFactor: (coverage: string, factor: string, freedom: string | undefined): string =>
			freedom === undefined
				? `The ${coverage} coverage interval reaches ${factor} standard uncertainties to either side, from the normal distribution.`
				: `The ${coverage} coverage interval reaches ${factor} standard uncertainties to either side, from Student’s t-distribution with ${freedom} effective degrees of freedom.`,
		redrawn: (count: string): string =>
			`Trials that drew a physically impossible value were drawn again (${count}); the distributions are truncated accordingly.`,
		notConverged:
			'The trials are fewer than two settled digits ask for at this coverage: the last printed digit may change with the seed.',
		independent: 'The inputs were taken as independent of each other.',
		correlated: (pairs: string): string =>
			`Correlations taken into account: ${pairs}. All other inputs were taken as independent.`,
		rounding: (): Phrase => [
			'An uncertainty is printed with one significant digit, or with two where the first is 1 or 2, and its value to the same decimal place ',
			cite('jcgm-100'),
			'. A number printed with “standard uncertainty” is one standard deviation; an interval always names its coverage.'
		]
	},

	distribution: {
		exact: 'exact',
		normal: 'normal',
		rectangular: 'rectangular',
		triangular: 'triangular',
		trapezoidal: 'trapezoidal',
		arcsine: 'arcsine',
		'curvilinear-trapezoid': 'curvilinear trapezoid',
		lognormal: 'lognormal',
		'students-t': 'Student’s t',
		beta: 'beta',
		exponential: 'exponential',
		discrete: 'discrete'
	},
	halfWidth: (width: string): string => `half-width ${width}`,
	between: (low: string, high: string): string => `${low} to ${high}`,
	mode: (mode: string): string => `most likely ${mode}`,
	degreesOfFreedom: (count: string): string => `${count} degrees of freedom`,
	geometric: (factor: string): string => `geometric standard deviation ${factor}`,
	shape: (text: string): string => `shape ${text}`,
	oneOf: (values: string): string => `one of ${values}`,

	cautions: {
		'hot-surface': 'Hot surface.',
		'heat-exposure': 'Heat exposure.',
		'hardware-margin': 'No design margin.',
		'not-irrigation-advice': 'Not irrigation advice.',
		'area-mismatch': 'Different areas.',
		'period-mismatch': 'Different periods.',
		'temperature-kind-mismatch': 'Different kinds of temperature.',
		'above-airless-bound': 'Above the bound without an atmosphere.',
		'below-no-storage-bound': 'Below the bound without storage.',
		'effective-read-as-mean': 'Not a mean.',
		'night-side-unsupplied': 'The night side is not supplied.',
		'cause-not-computed': 'Cause not computed.',
		'albedo-kind': 'Kind of albedo.',
		'emissivity-assumed-one': 'Emissivity taken as one.',
		'irradiance-superseded': 'Superseded irradiance.',
		'value-kind': 'Kind of value.',
		'digits-beyond-uncertainty': 'More digits than are known.',
		'difference-unresolved': 'Difference not resolved.',
		'outside-validity': 'Outside the validated range.',
		'linear-propagation-doubtful': 'First-order uncertainty is doubtful.',
		'single-source-input': 'One source only.',
		'correlation-ignored': 'Correlation ignored.',
		'not-converged': 'Not converged.'
	} as Readonly<Record<string, string>>,
	cautionLevels: { note: 'Note.', caution: 'Caution.', stop: 'Comparison stopped.' }
};

export type Catalogue = typeof britishEnglish;
export type { PhrasePart };
