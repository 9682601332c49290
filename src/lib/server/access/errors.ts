/** What a person may not see answers as if it were not there. */
export class NotFoundError extends Error {
	constructor(what = 'page') {
		super(`This ${what} does not exist, or you have no access to it.`);
		this.name = 'NotFoundError';
	}
}

/** What a person may see but not do. */
export class ForbiddenError extends Error {
	constructor(message: string) {
		super(message);
		this.name = 'ForbiddenError';
	}
}

/** What was there and was taken away on purpose: it may be said that it is gone, and nothing of what it was. */
export class GoneError extends Error {
	constructor(message: string) {
		super(message);
		this.name = 'GoneError';
	}
}

/** Somebody else saved first. */
export class ConflictError extends Error {
	constructor(message: string) {
		super(message);
		this.name = 'ConflictError';
	}
}

/** Input that cannot be taken as it stands; `fields` by form field name. */
export class InvalidInputError extends Error {
	readonly fields: Readonly<Record<string, string>>;

	constructor(message: string, fields: Record<string, string> = {}) {
		super(message);
		this.name = 'InvalidInputError';
		this.fields = fields;
	}
}

/** More tries than the limit allows; `retryAfter` in seconds. */
export class TooManyRequestsError extends Error {
	readonly retryAfter: number;

	constructor(retryAfter: number) {
		const minutes = Math.max(1, Math.ceil(retryAfter / 60));
		super(`Too many tries. Please try again in ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}.`);
		this.name = 'TooManyRequestsError';
		this.retryAfter = retryAfter;
	}
}
