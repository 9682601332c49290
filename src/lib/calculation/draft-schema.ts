import { z } from 'zod';
import type { CalculationDraft } from './draft';
import { spreads } from './spreads';
import { storable } from './storable';

/*
 * What a browser may send as a draft. Everything typed is text of bounded length; ids are checked against the method
 * later. Strict throughout: an unknown key is an error, so that nothing rides along into the database.
 */

const short = z.string().max(200).transform(storable);
const long = z.string().max(4000).transform(storable);
const id = z.string().regex(/^[A-Za-z][A-Za-z0-9]{0,63}$/);
const area = z.enum(['point', 'sunlit-hemisphere', 'whole-sphere', 'site', 'not-stated']);
const period = z.enum(['instant', 'day', 'year', 'orbit', 'not-stated']);
const temperatureKind = z.enum(['effective', 'equilibrium', 'skin', 'radiometric', 'air-2m', 'not-stated']);

const source = z.strictObject({
	kind: z.enum(['default', 'citation', 'file', 'judgement', 'not-sure']).nullable(),
	text: long,
	evidenceId: z.uuid().nullable(),
	valueKind: z.enum(['new', 'aged', 'not-stated']).optional(),
	spreadMeans: z.enum(['standard-uncertainty', 'tolerance', 'not-stated']).optional()
});

const assumption = z.strictObject({
	value: short,
	unit: z.string().max(60).transform(storable),
	spread: z.enum(spreads.map((spread) => spread.kind)),
	spreadValues: z.record(id, long),
	source,
	note: long
});

export const draftSchema: z.ZodType<CalculationDraft> = z.strictObject({
	kind: z.enum(['find-value', 'check-claim', 'test-limit']),
	method: z
		.string()
		.regex(/^[a-z][a-z0-9-]{0,63}$/)
		.nullable(),
	assumptions: z.record(id, assumption),
	options: z.record(id, short),
	correlations: z.array(z.strictObject({ a: id, b: id, coefficient: short })).max(200),
	evaluation: z.strictObject({
		propagation: z.enum(['monte-carlo', 'first-order']),
		trials: short,
		seed: short,
		coverage: short,
		interval: z.enum(['symmetric', 'shortest'])
	}),
	claim: z
		.strictObject({
			value: short,
			unit: z.string().max(60).transform(storable),
			standardUncertainty: short,
			output: id,
			area,
			period,
			temperatureKind,
			decimals: short,
			quotation: long,
			citation: long
		})
		.nullable(),
	limit: z
		.strictObject({
			value: short,
			unit: z.string().max(60).transform(storable),
			output: id,
			sense: z.enum(['at-most', 'at-least']),
			rule: z.enum(['simple-acceptance', 'guard-band']),
			risk: short,
			source: long
		})
		.nullable(),
	temperatureUnit: z.enum(['K', 'degC', 'degF']),
	visited: z.array(z.string().max(64).transform(storable)).max(50)
});
