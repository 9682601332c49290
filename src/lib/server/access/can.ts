import { ForbiddenError, NotFoundError } from './errors';
import type { Membership, Role } from './membership';

/** Everything that a member can do, as a closed list. What is not listed for a role is denied. */
export const actions = [
	'dossier.read',
	'dossier.write',
	'guests.manage',
	'calculation.read',
	'calculation.write',
	'evidence.write',
	'report.read',
	'report.write',
	/** Remark on lines and answer remarks. */
	'report.comment',
	'report.review',
	'report.issue',
	'report.share',
	'organisation.read',
	'organisation.manage',
	'members.read',
	'members.manage',
	'billing.manage',
	'audit.read'
] as const;

export type Action = (typeof actions)[number];

const reading: readonly Action[] = [
	'dossier.read',
	'calculation.read',
	'report.read',
	'organisation.read',
	'members.read'
];

const granted: Readonly<Record<Role, readonly Action[]>> = {
	owner: [
		...reading,
		'guests.manage',
		'report.share',
		'organisation.manage',
		'members.manage',
		'billing.manage',
		'audit.read'
	],
	billing: ['organisation.read', 'billing.manage'],
	author: [
		...reading,
		'dossier.write',
		'guests.manage',
		'calculation.write',
		'evidence.write',
		'report.write',
		'report.comment',
		'report.issue',
		'report.share'
	],
	reviewer: [...reading, 'report.comment', 'report.review'],
	reader: reading,
	// Within the dossiers that they were invited to, and nothing of the organisation itself.
	guest: ['dossier.read', 'calculation.read', 'report.read', 'report.comment', 'report.review']
};

/** @returns whether any of the member's roles grants the action; false without a membership. */
export function can(membership: Membership | null, action: Action): boolean {
	return membership !== null && membership.roles.some((role) => granted[role].includes(action));
}

/**
 * First line of every use case.
 * @throws NotFoundError where the member may not even see the thing, ForbiddenError where they may see but not do.
 */
export function requireAction(
	membership: Membership | null,
	action: Action
): asserts membership is Membership {
	if (can(membership, action)) return;
	const read: Partial<Record<string, Action>> = {
		dossier: 'dossier.read',
		guests: 'dossier.read',
		evidence: 'dossier.read',
		calculation: 'calculation.read',
		report: 'report.read',
		organisation: 'organisation.read',
		members: 'members.read',
		billing: 'organisation.read',
		audit: 'organisation.read'
	};
	const seeing = read[action.split('.')[0] ?? ''];
	if (seeing !== undefined && seeing !== action && can(membership, seeing)) {
		throw new ForbiddenError('Your role in this organisation does not allow this.');
	}
	throw new NotFoundError();
}
