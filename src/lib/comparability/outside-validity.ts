import { describeRange, isInside } from '../calculation/check-input';
import type { Caution } from '../calculation/types';
import { formatSignificant, attachUnit } from '../quantities';
import type { Rule } from './context';

/** Inputs outside the range for which the method's source vouches. */
export const outsideValidity: Rule = ({ checked }) => {
	const { method, used } = checked.model;
	const cautions: Caution[] = [];
	for (const spec of method.inputs) {
		if (spec.kind !== 'number' || spec.validity === undefined) continue;
		const value = used[spec.id]?.value;
		if (typeof value !== 'number' || isInside(value, spec.validity)) continue;
		const { validity } = spec;
		cautions.push({
			code: 'outside-validity',
			level: 'caution',
			text: `The ${spec.name} of ${attachUnit(formatSignificant(value), spec.unit)} lies outside the range for which the method was published: ${describeRange(validity, spec.unit)}.`,
			figures: { [spec.id]: value },
			source: method.citations.find(({ id }) => id === validity.source)?.text ?? validity.source,
			inputs: [spec.id]
		});
	}
	return cautions;
};
