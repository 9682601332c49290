import { inArray, type Column, type SQL } from 'drizzle-orm';
import { NotFoundError } from './errors';
import type { Membership } from './membership';

/**
 * Condition that keeps a query within what the person may reach. Stands beside the condition on the organisation in
 * every query on something that belongs to a dossier.
 * @param dossierId column with the id of the dossier
 * @returns undefined, which adds nothing, for a member
 */
export function inReach(membership: Membership, dossierId: Column): SQL | undefined {
	return membership.onlyDossiers === null ? undefined : inArray(dossierId, [...membership.onlyDossiers]);
}

/** The same for one dossier whose id is at hand. @throws NotFoundError */
export function requireReach(membership: Membership, dossierId: string): void {
	if (membership.onlyDossiers !== null && !membership.onlyDossiers.includes(dossierId)) {
		throw new NotFoundError('dossier');
	}
}
