/** A fault in what was asked, in words that say what to do, with the place it stands at. */
export interface Problem {
	code: string;
	message: string;
	/** JSON Pointer (RFC 6901) into the request. */
	path: string;
}

/** Thrown for bad input only; anything else that is thrown is a fault of ours. */
export class ProblemError extends Error {
	readonly code: string;
	readonly path: string;

	constructor(code: string, message: string, path: string) {
		super(message);
		this.name = 'ProblemError';
		this.code = code;
		this.path = path;
	}

	toJSON(): { error: Problem } {
		return { error: { code: this.code, message: this.message, path: this.path } };
	}
}
