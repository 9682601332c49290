import { claimOf, isUnstated, periodWords, type Rule } from './context';

const source = 'Comparability rule of this service: like with like.';

/** A stated number and a result that average over different times, or may do so. */
export const periodMismatch: Rule = (context) => {
	const compared = claimOf(context);
	if (compared === undefined) return [];
	const { claim, output } = compared;
	if (isUnstated(claim.period, output)) {
		return [
			{
				code: 'period-mismatch',
				level: 'caution',
				text: `The stated number does not say what time it stands for; it is compared as if it stood for ${periodWords[output.period]}.`,
				source,
				outputs: [output.id]
			}
		];
	}
	if (claim.period === undefined || claim.period === output.period) return [];
	return [
		{
			code: 'period-mismatch',
			level: 'stop',
			text: `The stated number stands for ${periodWords[claim.period]}, the result for ${periodWords[output.period]}. The two cannot be said to agree.`,
			source,
			outputs: [output.id]
		}
	];
};
