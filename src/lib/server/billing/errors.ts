import { ConflictError } from '../access/errors';

/** Nothing is left to issue a report with, or an invoice stops new exports. The report stays as it is. */
export class NoExportsError extends ConflictError {
	readonly kind = 'no-exports';

	constructor(message: string) {
		super(message);
		this.name = 'NoExportsError';
	}
}

/** The payment service does not answer, or not as it should; nothing was changed that a further try would not find. */
export class PaymentsAwayError extends Error {
	constructor(options?: ErrorOptions) {
		super('The payment service does not answer at this moment. Please try again in a minute.', options);
		this.name = 'PaymentsAwayError';
	}
}

/** An event that the payment service did not sign, or that is not meant for this service. */
export class RefusedEventError extends Error {
	constructor(message: string) {
		super(message);
		this.name = 'RefusedEventError';
	}
}
