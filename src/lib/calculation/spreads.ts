import type { SpreadKind } from './draft';
import type { DistributionType } from './types';

/** How a parameter is measured: as the value is, as a difference of it, or as a pure number. */
type Measure = 'value' | 'difference' | 'number';

export interface SpreadParameter {
	/** The contract's name. */
	id: string;
	label: string;
	measure: Measure;
	list?: boolean;
	/** Filled in where left empty. */
	suggestion?: string;
}

export interface Spread {
	kind: SpreadKind;
	type: DistributionType;
	/** As the form's choice reads. */
	label: string;
	/** When to choose it. */
	help: string;
	parameters: readonly SpreadParameter[];
}

const halfWidth: SpreadParameter = { id: 'halfWidth', label: 'Half range', measure: 'difference' };
const low: SpreadParameter = { id: 'low', label: 'Lowest', measure: 'value' };
const high: SpreadParameter = { id: 'high', label: 'Highest', measure: 'value' };
const standardUncertainty: SpreadParameter = {
	id: 'standardUncertainty',
	label: 'Give or take',
	measure: 'difference'
};

/** The distributions of JCGM 101 table 1 and the discrete one, in the words of the form. */
export const spreads: readonly Spread[] = [
	{
		kind: 'exact',
		type: 'exact',
		label: 'exact',
		help: 'A definition, or so well known that it does not matter.',
		parameters: []
	},
	{
		kind: 'normal',
		type: 'normal',
		label: 'standard, normal',
		help: 'A standard uncertainty, as a calibration or a fit gives it. An expanded one is divided by its k first.',
		parameters: [standardUncertainty]
	},
	{
		kind: 'rectangular',
		type: 'rectangular',
		label: 'half range, even',
		help: 'Anywhere within plus or minus this, nowhere outside: a tolerance, a rounding.',
		parameters: [{ ...halfWidth, label: 'Give or take' }]
	},
	{
		kind: 'rectangular-bounds',
		type: 'rectangular',
		label: 'from low to high, even',
		help: 'Anywhere between two bounds.',
		parameters: [low, high]
	},
	{
		kind: 'triangular',
		type: 'triangular',
		label: 'half range, middle likelier',
		help: 'Within plus or minus this, the middle likelier than the ends (triangular).',
		parameters: [{ ...halfWidth, label: 'Give or take' }]
	},
	{
		kind: 'triangular-bounds',
		type: 'triangular',
		label: 'low, likeliest, high',
		help: 'Between two bounds with a likeliest value (triangular).',
		parameters: [low, { id: 'mode', label: 'Likeliest', measure: 'value' }, high]
	},
	{
		kind: 'trapezoidal',
		type: 'trapezoidal',
		label: 'half range, flat top',
		help: 'A sum of two even ranges (trapezoidal); the top is this share of the foot.',
		parameters: [halfWidth, { id: 'beta', label: 'Top over foot', measure: 'number' }]
	},
	{
		kind: 'arcsine',
		type: 'arcsine',
		label: 'half range, swinging',
		help: 'A value that swings like a sine: the ends are likelier than the middle (arcsine).',
		parameters: [halfWidth]
	},
	{
		kind: 'curvilinear-trapezoid',
		type: 'curvilinear-trapezoid',
		label: 'half range, bounds unsure',
		help: 'An even range whose bounds are themselves inexact (curvilinear trapezoid).',
		parameters: [halfWidth, { id: 'inexactness', label: 'Bounds give or take', measure: 'difference' }]
	},
	{
		kind: 'lognormal',
		type: 'lognormal',
		label: 'by a factor, lognormal',
		help: 'Right to within a factor: a geometric standard deviation, above 1.',
		parameters: [{ id: 'geometricStandardDeviation', label: 'Factor', measure: 'number' }]
	},
	{
		kind: 'students-t',
		type: 'students-t',
		label: 'mean of a few readings',
		help: 'The standard uncertainty of a mean of few readings (Student’s t).',
		parameters: [
			standardUncertainty,
			{ id: 'degreesOfFreedom', label: 'Degrees of freedom', measure: 'number' }
		]
	},
	{
		kind: 'beta',
		type: 'beta',
		label: 'low to high, beta',
		help: 'Between two bounds with a shape of its own (beta).',
		parameters: [
			low,
			high,
			{ id: 'alpha', label: 'Alpha', measure: 'number' },
			{ id: 'beta', label: 'Beta', measure: 'number' }
		]
	},
	{
		kind: 'exponential',
		type: 'exponential',
		label: 'exponential, this mean',
		help: 'Only the mean is known, and it cannot be negative.',
		parameters: []
	},
	{
		kind: 'discrete',
		type: 'discrete',
		label: 'one of several values',
		help: 'One of these values, with these weights.',
		parameters: [
			{ id: 'values', label: 'Values, apart by semicolons', measure: 'value', list: true },
			{ id: 'weights', label: 'Weights, apart by semicolons', measure: 'number', list: true }
		]
	}
];

/** @throws Error for a kind that does not exist, which a checked draft never holds. */
export function spreadOf(kind: SpreadKind): Spread {
	const found = spreads.find((spread) => spread.kind === kind);
	if (found === undefined) throw new Error(`No spread of kind ${kind}.`);
	return found;
}
