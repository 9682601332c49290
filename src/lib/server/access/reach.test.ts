import { PgDialect, pgTable, uuid } from 'drizzle-orm/pg-core';
import { describe, expect, it } from 'vitest';
import { NotFoundError } from './errors';
import type { Membership } from './membership';
import { inReach, requireReach } from './reach';

const things = pgTable('things', { dossierId: uuid('dossier_id') });
const base = { organisationId: 'o', organisationName: 'O', userId: 'u' };
const member: Membership = { ...base, roles: ['author'], onlyDossiers: null };
const guest = (onlyDossiers: string[]): Membership => ({ ...base, roles: ['guest'], onlyDossiers });

function written(membership: Membership) {
	const condition = inReach(membership, things.dossierId);
	return condition === undefined ? undefined : new PgDialect().sqlToQuery(condition);
}

describe('what a person may reach', () => {
	it('is everything for a member', () => {
		expect(written(member)).toBeUndefined();
		expect(() => requireReach(member, 'any')).not.toThrow();
	});

	it('is their dossiers for a guest, and nothing where there is none', () => {
		expect(written(guest(['a', 'b']))).toMatchObject({
			sql: '"things"."dossier_id" in ($1, $2)',
			params: ['a', 'b']
		});
		expect(written(guest([]))?.sql).toBe('false');
		expect(() => requireReach(guest(['a']), 'a')).not.toThrow();
		expect(() => requireReach(guest(['a']), 'b')).toThrow(NotFoundError);
		expect(() => requireReach(guest([]), 'a')).toThrow(NotFoundError);
	});
});
