/** `guest` is no role of a member: it is what somebody has who was invited to one dossier. */
export type Role = 'owner' | 'billing' | 'author' | 'reviewer' | 'reader' | 'guest';

/** Roles that a member can hold. */
export type MemberRole = Exclude<Role, 'guest'>;

/** The organisation that a person acts in, with their roles there. Every query is scoped by `organisationId`. */
export interface Membership {
	organisationId: string;
	organisationName: string;
	userId: string;
	roles: readonly Role[];
	/** Null for a member: every dossier. A guest reaches these alone: see `inReach`. */
	onlyDossiers: readonly string[] | null;
}
