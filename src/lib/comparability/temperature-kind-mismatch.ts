import type { Caution } from '../calculation/types';
import { claimOf, isUnstated, kindWords, type Rule } from './context';

const source = 'Comparability rule of this service: like with like.';

/** A stated number and a result that mean different temperatures; and the defined observed-minus-effective. */
export const temperatureKindMismatch: Rule = (context) => {
	const cautions: Caution[] = [];
	const compared = claimOf(context);
	const kind = compared?.output.temperatureKind;
	if (compared !== undefined && kind !== undefined) {
		const { claim, output } = compared;
		if (isUnstated(claim.temperatureKind, compared.output)) {
			cautions.push({
				code: 'temperature-kind-mismatch',
				level: 'caution',
				text: `The stated number does not say which temperature it means; it is compared as if it were ${kindWords[kind]}.`,
				source,
				outputs: [output.id]
			});
		} else if (claim.temperatureKind !== undefined && claim.temperatureKind !== kind) {
			cautions.push({
				code: 'temperature-kind-mismatch',
				level: 'stop',
				text: `The stated number is ${kindWords[claim.temperatureKind]}, the result ${kindWords[kind]}. The two cannot be said to agree.`,
				source,
				outputs: [output.id]
			});
		}
	}
	if (context.outputs.temperatureDifference !== undefined) {
		const observed = context.checked.model.setting.options.observedKind as keyof typeof kindWords;
		cautions.push({
			code: 'temperature-kind-mismatch',
			level: 'note',
			text: `The observed number is ${kindWords[observed] ?? kindWords['not-stated']}, the other an effective temperature. Their difference is a defined quantity; a small one is no agreement.`,
			figures: { temperatureDifference: context.outputs.temperatureDifference.value },
			source,
			outputs: ['temperatureDifference']
		});
	}
	return cautions;
};
