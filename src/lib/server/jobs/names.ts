/**
 * Every job there is, with what it carries. A payload holds ids only: documents and rights are read when the job
 * runs, so that a job never works with what was true when it was asked for.
 */
export interface JobPayloads {
	/** Compute a run that was too long for a request. */
	'compute-run': { runId: string };
	/** Render, sign and keep the one issue of a report's revision. */
	'issue-report': { issueId: string };
	/** Render a draft for its author's eyes: watermarked, unsigned. */
	'render-preview': { previewId: string };
	/** Remove what was deleted more than thirty days ago and what has run out. */
	'purge-deleted': Record<string, never>;
	/** Send one mail that followed from a change. */
	'send-notice': { noticeId: string };
	/** Bring our copy up to an event of the payment service. */
	'billing-event': { eventId: string };
	/** Compare our copy with the payment service and mend it; daily. */
	'billing-reconcile': Record<string, never>;
}

export type JobName = keyof JobPayloads;

/** How a job is retried and how long one attempt may take. */
export interface JobPolicy {
	/** Attempts after the first. */
	retryLimit: number;
	/** Seconds before the first retry; doubled, with a random part, for each further one. */
	retryDelay: number;
	/** Longest time of one attempt, seconds; its lease is renewed no longer than this. */
	limitSeconds: number;
}

export const jobPolicies: Readonly<Record<JobName, JobPolicy>> = {
	'compute-run': { retryLimit: 3, retryDelay: 2, limitSeconds: 900 },
	'issue-report': { retryLimit: 5, retryDelay: 2, limitSeconds: 300 },
	'render-preview': { retryLimit: 1, retryDelay: 1, limitSeconds: 120 },
	'purge-deleted': { retryLimit: 2, retryDelay: 60, limitSeconds: 300 },
	// A mail server may be away for hours: about twelve of them.
	'send-notice': { retryLimit: 10, retryDelay: 10, limitSeconds: 60 },
	'billing-event': { retryLimit: 10, retryDelay: 5, limitSeconds: 60 },
	'billing-reconcile': { retryLimit: 2, retryDelay: 60, limitSeconds: 600 }
};

export const jobNames = Object.keys(jobPolicies) as JobName[];

/**
 * A worker holds a job by a lease that it renews every `beatSeconds`. A worker that dies or hangs renews no more,
 * and another one takes the job over: lease + sweep + first retry delay stay under a minute.
 */
export const lease = { seconds: 30, beatSeconds: 5, sweepSeconds: 5 } as const;

/** Where a job goes whose attempts are used up; it is then shown as failed where its subject is shown. */
export function deadLetterOf(name: JobName): string {
	return `${name}-dead`;
}
