import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { actions, can, requireAction, type Action } from './can';
import { ForbiddenError, NotFoundError } from './errors';
import type { Membership, Role } from './membership';

const roles: readonly Role[] = ['owner', 'billing', 'author', 'reviewer', 'reader', 'guest'];

function member(held: readonly Role[]): Membership {
	return { organisationId: 'o', organisationName: 'O', userId: 'u', roles: held, onlyDossiers: null };
}

/* Written out a second time on purpose, by action: a slip in the table by role shows against it. */
const allowed: Readonly<Record<Action, readonly Role[]>> = {
	'dossier.read': ['owner', 'author', 'reviewer', 'reader', 'guest'],
	'dossier.write': ['author'],
	'guests.manage': ['owner', 'author'],
	'calculation.read': ['owner', 'author', 'reviewer', 'reader', 'guest'],
	'calculation.write': ['author'],
	'evidence.write': ['author'],
	'report.read': ['owner', 'author', 'reviewer', 'reader', 'guest'],
	'report.write': ['author'],
	'report.comment': ['author', 'reviewer', 'guest'],
	'report.review': ['reviewer', 'guest'],
	'report.issue': ['author'],
	'report.share': ['owner', 'author'],
	'organisation.read': ['owner', 'billing', 'author', 'reviewer', 'reader'],
	'organisation.manage': ['owner'],
	'members.read': ['owner', 'author', 'reviewer', 'reader'],
	'members.manage': ['owner'],
	'billing.manage': ['owner', 'billing'],
	'audit.read': ['owner']
};

describe('can', () => {
	it.each(actions.flatMap((action) => roles.map((role) => [role, action] as const)))(
		'%s, %s',
		(role, action) => {
			expect(can(member([role]), action)).toBe(allowed[action].includes(role));
		}
	);

	it('denies everything without a membership or without roles', () => {
		for (const action of actions) {
			expect(can(null, action)).toBe(false);
			expect(can(member([]), action)).toBe(false);
		}
	});

	it('grants a member of several roles what any of them grants, and no more', () => {
		fc.assert(
			fc.property(fc.subarray([...roles]), fc.constantFrom(...actions), (held, action) => {
				expect(can(member(held), action)).toBe(held.some((role) => allowed[action].includes(role)));
			})
		);
	});
});

describe('requireAction', () => {
	it('throws exactly where can() denies: not found where nothing may be seen, forbidden where it may', () => {
		fc.assert(
			fc.property(fc.subarray([...roles]), fc.constantFrom(...actions), (held, action) => {
				const membership = member(held);
				const attempt = () => requireAction(membership, action);
				const seen = seeing(action) !== action && can(membership, seeing(action));
				if (can(membership, action)) expect(attempt).not.toThrow();
				else expect(attempt).toThrow(seen ? ForbiddenError : NotFoundError);
			})
		);
	});

	it('hides everything from somebody who is no member', () => {
		for (const action of actions) expect(() => requireAction(null, action)).toThrow(NotFoundError);
	});
});

function seeing(action: Action): Action {
	const thing = action.split('.')[0];
	if (thing === 'evidence' || thing === 'guests') return 'dossier.read';
	if (thing === 'billing' || thing === 'audit') return 'organisation.read';
	return actions.find((one) => one === `${thing}.read`) ?? 'organisation.read';
}
