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
