import type { JobDefinitions } from '../job';
import { jobNames } from '../names';

/** Every job done at once and without effect, for tests that look at one of them. */
export function idleJobs(own: Partial<JobDefinitions>): JobDefinitions {
	const idle = { handle: () => Promise.resolve(), abandon: () => Promise.resolve() };
	return { ...Object.fromEntries(jobNames.map((name) => [name, idle])), ...own } as JobDefinitions;
}
