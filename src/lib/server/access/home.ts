import { can } from './can';
import type { Membership } from './membership';

/** The page where a person starts: their dossiers, or what else they may see. */
export function homeOf(membership: Membership | null): string {
	if (membership === null) return '/organisation/new';
	if (can(membership, 'dossier.read')) return '/dossiers';
	return can(membership, 'billing.manage') ? '/billing' : '/organisation';
}
