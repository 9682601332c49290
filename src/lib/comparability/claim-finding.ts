import type { Caution, ClaimComparison, ClaimFinding } from '../calculation/types';
import { integerPower } from '../exact';
import {
	attachUnit,
	convert,
	convertDifference,
	formatNumber,
	decimalsFor,
	formatSignificant
} from '../quantities';
import { normalQuantile } from '../uncertainty/special/normal';
import { studentsTQuantile } from '../uncertainty/special/students-t';
import { estimateOf, specOf, type RuleContext } from './context';

/** Standard uncertainty of a claim: as stated, else that of rounding to its decimals, else none. */
function claimUncertainty({ standardUncertainty, decimals }: ClaimComparison): number {
	if (standardUncertainty !== undefined) return standardUncertainty;
	return decimals === undefined ? 0 : integerPower(10, -decimals) / Math.sqrt(12);
}

/**
 * A stated number against a result: difference (stated minus computed), normalised error E_n and zeta score in the terms
 * of ISO 13528, both in the claim's unit. E_n divides by the expanded uncertainty at the coverage of the evaluation (normal, or
 * Student's t where the result has finite degrees of freedom).
 * Any caution of the level `stop` makes the two not comparable, whatever the figures.
 */
export function claimFinding(
	claim: ClaimComparison,
	context: RuleContext,
	cautions: readonly Caution[]
): ClaimFinding {
	const spec = specOf(context, claim.output);
	const output = context.outputs[claim.output];
	if (spec === undefined || output === undefined) throw new Error(`No output ${claim.output}.`);
	const unit = claim.unit ?? spec.unit;
	const difference = spec.quantity === 'temperature-difference';
	const toClaim = difference ? convertDifference : convert;
	const computed = toClaim(estimateOf(output), spec.unit, unit);
	const u = convertDifference(output.standardUncertainty ?? 0, spec.unit, unit);
	const statedU = claimUncertainty(claim);
	const apart = claim.value - computed;
	const combined = Math.sqrt(u * u + statedU * statedU);
	const finding: ClaimFinding = {
		kind: 'claim',
		output: claim.output,
		stated: { value: claim.value, unit, ...(statedU > 0 ? { standardUncertainty: statedU } : {}) },
		result: { value: computed, unit, standardUncertainty: u },
		difference: apart,
		differenceUncertainty: combined,
		verdict: 'not-comparable',
		reasons: []
	};
	const p = (1 + context.checked.evaluation.coverage) / 2;
	const k = normalQuantile(p);
	const ours = studentsTQuantile(p, output.effectiveDegreesOfFreedom ?? Infinity) * u;
	const expanded = u > 0 ? Math.sqrt(ours * ours + k * statedU * (k * statedU)) : k * statedU;
	if (combined > 0) {
		finding.zetaScore = apart / combined;
		finding.normalisedError = apart / expanded;
	}
	const stops = cautions.filter(({ level }) => level === 'stop');
	if (stops.length > 0) {
		finding.reasons = stops.map(({ text }) => text);
		return finding;
	}
	const agrees = combined > 0 ? Math.abs(apart) <= expanded : apart === 0;
	finding.verdict = agrees ? 'consistent' : 'inconsistent';
	finding.reasons = [sentence(apart, expanded, unit, combined > 0)];
	if (claim.standardUncertainty === undefined) {
		finding.reasons.push(
			claim.decimals === undefined
				? 'The stated number carries no uncertainty; it is taken as exact.'
				: 'The stated number carries no uncertainty; only its rounding is allowed for.'
		);
	}
	if (context.checked.evaluation.propagation === 'none' && hasUncertainInput(context)) {
		finding.reasons.push('No uncertainty was propagated, so the result is compared as if it were exact.');
	}
	return finding;
}

function hasUncertainInput({ checked }: RuleContext): boolean {
	return checked.model.columns.some(({ distribution }) => distribution.standardUncertainty > 0);
}

function sentence(apart: number, expanded: number, unit: string, resolved: boolean): string {
	const differenceUnit = unit === 'degC' ? 'K' : unit;
	if (!resolved) {
		return `Stated minus computed is ${attachUnit(formatSignificant(apart), differenceUnit)}, and neither carries an uncertainty.`;
	}
	const decimals = decimalsFor(expanded) ?? 1;
	const write = (value: number) => attachUnit(formatNumber(value, decimals), differenceUnit);
	return `Stated minus computed is ${write(apart)}; its expanded uncertainty is ${write(expanded)}.`;
}
