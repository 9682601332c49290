import { compute, type ComputeOptions } from '../calculation/compute';
import type { ComputationRecord } from '../calculation/types';
import { recordHash } from './seal';

export interface Difference {
	/** JSON Pointer into the result. */
	path: string;
	stored: unknown;
	recomputed: unknown;
}

export interface Recomputation {
	/** True if every figure and word came out as stored, and the stored hash is that of the stored record. */
	recomputed: boolean;
	/** Numbers compared. */
	figures: number;
	/** At most the first 100. */
	differences: Difference[];
}

const mostDifferences = 100;

class Comparison {
	figures = 0;
	count = 0;
	readonly differences: Difference[] = [];

	private note(path: string, stored: unknown, recomputed: unknown): void {
		this.count++;
		if (this.differences.length < mostDifferences) {
			this.differences.push({ path, stored: stored ?? null, recomputed: recomputed ?? null });
		}
	}

	walk(stored: unknown, recomputed: unknown, path: string): void {
		if (typeof stored === 'number' || typeof recomputed === 'number') {
			this.figures++;
			if (stored !== recomputed) this.note(path, stored, recomputed);
			return;
		}
		if (
			typeof stored !== 'object' ||
			typeof recomputed !== 'object' ||
			stored === null ||
			recomputed === null
		) {
			if (stored !== recomputed) this.note(path, stored, recomputed);
			return;
		}
		if (Array.isArray(stored) !== Array.isArray(recomputed)) {
			this.note(path, stored, recomputed);
			return;
		}
		const before = stored as Record<string, unknown>;
		const after = recomputed as Record<string, unknown>;
		for (const key of new Set([...Object.keys(before), ...Object.keys(after)])) {
			const at = `${path}/${key.replaceAll('~', '~0').replaceAll('/', '~1')}`;
			this.walk(
				Object.hasOwn(before, key) ? before[key] : undefined,
				Object.hasOwn(after, key) ? after[key] : undefined,
				at
			);
		}
	}
}

/**
 * Computes a stored record again and compares every number to the last bit, and every word.
 * @throws ProblemError if the stored request is not one that this engine takes
 */
export async function recompute(
	record: ComputationRecord,
	options: ComputeOptions = {}
): Promise<Recomputation> {
	const result = await compute(record.request, options);
	const comparison = new Comparison();
	// Through JSON, as the stored one went: keys without a value and negative zeros do not survive it.
	const fresh = JSON.parse(JSON.stringify(result)) as ComputationRecord['result'];
	comparison.walk({ ...record.result, record: undefined }, { ...fresh, record: undefined }, '');
	// The hash speaks for the stored record as it stands; what was recomputed has been compared figure by figure.
	comparison.walk(record.result.record, hashOf(record), '/record');
	return {
		recomputed: comparison.count === 0,
		figures: comparison.figures,
		differences: comparison.differences
	};
}

function hashOf({ request, result }: ComputationRecord): string {
	try {
		return recordHash(request, result);
	} catch {
		return 'not a record';
	}
}
