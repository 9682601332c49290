/** A fault that a person can mend: printed as its sentence, without a stack. */
export class PlainError extends Error {
	/** @param {string} message */
	constructor(message) {
		super(message);
		this.name = 'PlainError';
	}
}

/**
 * Runs a script's main function and turns what it throws into an exit code and a readable message.
 * @param {() => Promise<void>} main
 */
export function runScript(main) {
	main().catch((error) => {
		console.error(error instanceof PlainError ? error.message : error);
		process.exitCode = 1;
	});
}
