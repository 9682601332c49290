import type { Caution } from '../calculation/types';
import { areaWords, claimOf, isUnstated, type Rule } from './context';

const source = 'Comparability rule of this service: like with like.';

/** A stated number and a result that average over different areas, or may do so. */
export const areaMismatch: Rule = (context) => {
	const cautions: Caution[] = [];
	const compared = claimOf(context);
	if (compared !== undefined) {
		const { claim, output } = compared;
		if (isUnstated(claim.area, output)) {
			cautions.push({
				code: 'area-mismatch',
				level: 'caution',
				text: `The stated number does not say what area it stands for; it is compared as if it stood for ${areaWords[output.area]}.`,
				source,
				outputs: [output.id]
			});
		} else if (claim.area !== undefined && claim.area !== output.area) {
			cautions.push({
				code: 'area-mismatch',
				level: 'stop',
				text: `The stated number stands for ${areaWords[claim.area]}, the result for ${areaWords[output.area]}. The two cannot be said to agree.`,
				source,
				outputs: [output.id]
			});
		}
	}
	const { setting } = context.checked.model;
	const observed = setting.options.observedArea;
	if (
		context.outputs.temperatureDifference !== undefined &&
		typeof observed === 'string' &&
		observed !== 'whole-sphere'
	) {
		cautions.push({
			code: 'area-mismatch',
			level: 'caution',
			text: `The observed temperature stands for ${areaWords[observed as keyof typeof areaWords]}, the effective temperature for the whole body. Their difference is not due to one cause.`,
			source,
			inputs: ['observedTemperature'],
			outputs: ['temperatureDifference']
		});
	}
	return cautions;
};
