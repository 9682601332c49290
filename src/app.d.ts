import type { Person } from '$lib/server/accounts/person';
import type { Membership } from '$lib/server/access/membership';

declare global {
	namespace App {
		interface Error {
			message: string;
			/** What the reader may quote to the operator; the log holds the rest. */
			errorId?: string;
		}
		interface Locals {
			requestId: string;
			/** The signed-in person, or null. */
			person: Person | null;
			/** Digest that names the person's session, or null. */
			sessionId: string | null;
			/** The organisation that the person is acting in, with their roles there, or null. */
			membership: Membership | null;
		}
	}
}

export {};
