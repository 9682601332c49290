/** How the next requests to the API are to go wrong. */
export type Failure = {
	/** Only requests with this method; any unless given. */
	method?: string;
	/** Only paths that contain this text; any unless given. */
	path?: string;
	/** How many requests; 1 unless given. */
	times?: number;
	/** Status of the answer; where left out and `reset` is not set, the request is only slowed down. */
	status?: number;
	type?: string;
	code?: string;
	message?: string;
	headers?: Record<string, string>;
	/** Cut the connection instead of answering. */
	reset?: boolean;
	/** Only once the request has been carried out, so that the caller does not learn of its success. */
	after?: boolean;
	/** Milliseconds to wait before the request is carried out. */
	delayMilliseconds?: number;
};

/** Failures still to come, first come first served. */
export class Failures {
	private rules: (Failure & { times: number })[] = [];

	add(failure: Failure): void {
		this.rules.push({ ...failure, times: failure.times ?? 1 });
	}

	take(method: string, path: string): Failure | undefined {
		const rule = this.rules.find(
			(each) =>
				(each.method === undefined || each.method === method) &&
				(each.path === undefined || path.includes(each.path))
		);
		if (rule === undefined) return undefined;
		rule.times -= 1;
		this.rules = this.rules.filter(({ times }) => times > 0);
		return rule;
	}

	clear(): void {
		this.rules = [];
	}
}
