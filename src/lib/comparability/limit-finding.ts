import type { LimitComparison, LimitFinding } from '../calculation/types';
import {
	attachUnit,
	convert,
	convertDifference,
	decimalsFor,
	formatNumber,
	formatSignificant
} from '../quantities';
import { fromSi } from '../quantities/convert';
import { ownUnitOf } from '../calculation/check-input';
import { normalCdf, normalQuantile } from '../uncertainty/special/normal';
import { studentsTQuantile, studentsTUpper } from '../uncertainty/special/students-t';
import { estimateOf, specOf, type RuleContext } from './context';

interface Spread {
	/** Probability that the quantity is at or below the limit. */
	atOrBelow: number;
	/** Quantile in the limit's unit. */
	quantile(p: number): number;
}

/** The trials where there were any, else normal or, with finite degrees of freedom, Student's t; a step if exact. */
function spreadOf(
	limit: LimitComparison,
	context: RuleContext,
	estimate: number,
	u: number,
	unit: string,
	degrees: number | undefined
): Spread {
	const { trials } = context.propagated;
	const statistics = trials?.outputs[limit.output];
	const spec = specOf(context, limit.output);
	if (trials?.shareAtOrBelow !== undefined && statistics !== undefined && spec !== undefined) {
		const own = ownUnitOf(spec.unit);
		const { order } = statistics;
		const toLimit = spec.quantity === 'temperature-difference' ? convertDifference : convert;
		return {
			atOrBelow: trials.shareAtOrBelow,
			quantile: (p) =>
				toLimit(
					fromSi(order.at(Math.min(order.count, Math.max(1, Math.ceil(p * order.count)))), own),
					spec.unit,
					unit
				)
		};
	}
	if (u === 0) return { atOrBelow: estimate <= limit.value ? 1 : 0, quantile: () => estimate };
	const z = (limit.value - estimate) / u;
	if (degrees === undefined) {
		return { atOrBelow: normalCdf(z), quantile: (p) => estimate + u * normalQuantile(p) };
	}
	const upper = studentsTUpper(Math.abs(z), degrees);
	return {
		atOrBelow: z > 0 ? 1 - upper : upper,
		quantile: (p) => estimate + u * studentsTQuantile(p, degrees)
	};
}

/**
 * A result against a limit (JCGM 106:2012): probability of conformity from the trials, and the verdict by the decision
 * rule. Simple acceptance (8.2) looks at the estimate alone. A guard band (8.3) is set so wide that a result at
 * the acceptance limit has the allowed probability of lying beyond the limit; between the two no verdict is given.
 */
export function limitFinding(limit: LimitComparison, context: RuleContext): LimitFinding {
	const spec = specOf(context, limit.output);
	const output = context.outputs[limit.output];
	if (spec === undefined || output === undefined) throw new Error(`No output ${limit.output}.`);
	const unit = limit.unit ?? spec.unit;
	const toLimit = spec.quantity === 'temperature-difference' ? convertDifference : convert;
	const estimate = toLimit(estimateOf(output), spec.unit, unit);
	const u = convertDifference(output.standardUncertainty ?? 0, spec.unit, unit);
	const atMost = limit.sense === 'at-most';
	const spread = spreadOf(limit, context, estimate, u, unit, output.effectiveDegreesOfFreedom);
	const conformity =
		atMost || u > 0 ? (atMost ? spread.atOrBelow : 1 - spread.atOrBelow) : estimate >= limit.value ? 1 : 0;
	let guardBand = 0;
	let verdict: LimitFinding['verdict'];
	if (limit.rule.type === 'guard-band') {
		const { risk } = limit.rule;
		guardBand = Math.max(0, atMost ? spread.quantile(1 - risk) - estimate : estimate - spread.quantile(risk));
		verdict = conformity >= 1 - risk ? 'conforms' : conformity <= risk ? 'does-not-conform' : 'undecided';
	} else {
		verdict = (atMost ? estimate <= limit.value : estimate >= limit.value) ? 'conforms' : 'does-not-conform';
	}
	const accepted = verdict === 'conforms';
	return {
		kind: 'limit',
		output: limit.output,
		limit: {
			value: limit.value,
			unit,
			sense: limit.sense,
			...(limit.source === undefined ? {} : { source: limit.source })
		},
		result: { value: estimate, unit, standardUncertainty: u },
		rule: limit.rule,
		guardBand,
		acceptanceLimit: atMost ? limit.value - guardBand : limit.value + guardBand,
		probabilityOfConformity: conformity,
		risk: accepted
			? { kind: 'consumer', probability: 1 - conformity }
			: { kind: 'producer', probability: conformity },
		verdict,
		reasons: reasons(limit, estimate, u, unit, conformity)
	};
}

function reasons(
	limit: LimitComparison,
	estimate: number,
	u: number,
	unit: string,
	conformity: number
): string[] {
	const decimals = decimalsFor(u);
	const write = (value: number) =>
		attachUnit(decimals === undefined ? formatSignificant(value) : formatNumber(value, decimals), unit);
	const percent = attachUnit(formatNumber(100 * conformity, 1), '%');
	return [
		`The result is ${write(estimate)}; the limit is ${limit.sense === 'at-most' ? 'at most' : 'at least'} ${attachUnit(formatSignificant(limit.value), unit)}.`,
		`The probability that the limit is met is ${percent}.`,
		limit.rule.type === 'simple-acceptance'
			? 'Simple acceptance: the estimate alone is compared with the limit.'
			: `Guard band: a wrong acceptance may have a probability of at most ${attachUnit(formatSignificant(100 * limit.rule.risk, 3), '%')}.`
	];
}
