import type { ComputeRequest, ComputeResult } from '../calculation/types';
import { sha256Hex } from '../exact/sha256';
import { canonicalJson } from './canonical';

type Unsealed = Omit<ComputeResult, 'record'>;

/** `sha256:` and the hash over the canonical JSON of request and result, the result without its `record`. */
export function recordHash(request: ComputeRequest, result: Unsealed | ComputeResult): string {
	const bare: Record<string, unknown> = { ...result };
	delete bare.record;
	return `sha256:${sha256Hex(canonicalJson({ request, result: bare }))}`;
}

/** The result with its hash. */
export function sealRecord(request: ComputeRequest, result: Unsealed): ComputeResult {
	return { ...result, record: recordHash(request, result) };
}
