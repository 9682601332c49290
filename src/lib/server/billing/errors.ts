import { ConflictError } from '../access/errors';

/** Nothing is left to issue a report with, or an invoice stops new exports. The report stays as it is. */
export class NoExportsError extends ConflictError {
	readonly kind = 'no-exports';

	constructor(message: string) {
		super(message);
		this.name = 'NoExportsError';
	}
}

/** An event that the payment service did not sign, or that is not meant for this service. */
export class RefusedEventError extends Error {
	constructor(message: string) {
		super(message);
		this.name = 'RefusedEventError';
	}
}
