/** A fault that a person can mend: printed as its sentence, without a stack. */
export class PlainError extends Error {
	/** @param {string} message */
	constructor(message) {
		super(message);
		this.name = 'PlainError';
	}
}

/**
 * @param {unknown} error
 * @returns {string} what to print: a sentence where a person can mend it, everything otherwise
 */
export function explain(error) {
	if (error instanceof PlainError) return error.message;
	if (!(error instanceof Error)) return String(error);
	const { code, path } = /** @type {NodeJS.ErrnoException} */ (error);
	if ((code === 'EACCES' || code === 'EPERM') && path !== undefined) {
		return `${path} belongs to another user. Start as that user, or remove it first.`;
	}
	return error.stack ?? String(error);
}

/**
 * Runs a script's main function and turns what it throws into an exit code and a readable message.
 * @param {() => Promise<void>} main
 */
export function runScript(main) {
	main().catch((error) => {
		console.error(explain(error));
		process.exitCode = 1;
	});
}
