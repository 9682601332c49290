export type Role = 'owner' | 'billing' | 'author' | 'reviewer' | 'reader';

/** The organisation that a person acts in, with their roles there. Every query is scoped by `organisationId`. */
export interface Membership {
	organisationId: string;
	organisationName: string;
	userId: string;
	roles: readonly Role[];
}
