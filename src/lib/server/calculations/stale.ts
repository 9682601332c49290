import { isDeepStrictEqual } from 'node:util';
import type { CalculationDraft } from '$lib/calculation/draft';

/** True where a draft would now compute something else than a run did, or stand on other sources. */
export function isStale(now: CalculationDraft, then: CalculationDraft): boolean {
	return !isDeepStrictEqual({ ...now, visited: [] }, { ...then, visited: [] });
}
