/** A signed-in person as the rest of the server sees them: never the user row, never a hash or a token. */
export interface Person {
	id: string;
	name: string;
	email: string;
}
