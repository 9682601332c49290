import type { Logger } from 'pino';
import type { Database, Transaction } from '../db';
import type { JobName, JobPayloads } from './names';

/** What a handler is given besides the payload. */
export interface JobContext {
	jobId: string;
	/** 1 at the first attempt. */
	attempt: number;
	db: Database;
	log: Logger;
	/** Aborted when the hold on the job is lost, its time is up, or the worker shuts down. */
	signal: AbortSignal;
	/**
	 * Writes in a transaction that goes through only while this attempt still holds the job. For progress and states
	 * on the way.
	 * @throws LeaseLostError if another worker has taken over.
	 */
	guarded(write: (tx: Transaction) => Promise<void>): Promise<void>;
	/**
	 * The last act: writes the outcome and marks the job done in one transaction, so that an outcome is kept exactly
	 * once however often the job is delivered.
	 * @throws LeaseLostError if another worker has taken over.
	 */
	finish(write: (tx: Transaction) => Promise<void>): Promise<void>;
}

export interface JobDefinition<N extends JobName = JobName> {
	/**
	 * Does the work. Must bear being run twice. Returning without `finish` marks the job done; throwing hands it to
	 * the next attempt.
	 */
	handle(payload: JobPayloads[N], context: JobContext): Promise<void>;
	/**
	 * Called when the attempts are used up: shows the failure where the job's subject is shown.
	 * @param problem the words of a PermanentJobError; for any other fault a sentence without its internals.
	 */
	abandon(payload: JobPayloads[N], problem: string, tx: Transaction): Promise<void>;
}

/** One definition for every job name. */
export type JobDefinitions = { readonly [N in JobName]: JobDefinition<N> };

/**
 * Thrown by a handler for a fault that a further attempt cannot mend but a person can: the job goes to its dead letter at
 * once, and the message is shown to them.
 */
export class PermanentJobError extends Error {
	constructor(message: string, options?: ErrorOptions) {
		super(message, options);
		this.name = 'PermanentJobError';
	}
}
