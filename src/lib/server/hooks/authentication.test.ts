import { isRedirect, type RequestEvent } from '@sveltejs/kit';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import type { Membership } from '../access/membership';
import { setTestEnvironment } from '../testing/environment';

const home = '11111111-1111-4111-8111-111111111111';
const away = '22222222-2222-4222-8222-222222222222';
const foreign = '33333333-3333-4333-8333-333333333333';
const person = { id: 'p', name: 'Tavi Orme', email: 'tavi.orme@ferrowcourier.example' };
const of = (organisationId: string): Membership => ({
	organisationId,
	organisationName: organisationId,
	userId: person.id,
	roles: ['reviewer'],
	onlyDossiers: null
});

let signedIn = true;
vi.mock('../accounts/auth', () => ({
	readSession: () => Promise.resolve(signedIn ? { person, sessionId: 's' } : null)
}));
vi.mock('../organisations/memberships', () => ({
	membershipIn: (_person: unknown, id: string) => Promise.resolve(id === foreign ? null : of(id)),
	currentMembership: (_person: unknown, chosen: string | null) => Promise.resolve(of(chosen ?? home))
}));

const { authentication } = await import('./authentication');

beforeAll(() => setTestEnvironment());

interface Outcome {
	location: string | null;
	chosen: string | undefined;
	actsIn: string | undefined;
}

async function ask(path: string, method = 'GET'): Promise<Outcome> {
	const url = new URL(path, 'https://noonmark.example');
	let chosen: string | undefined;
	const locals: { membership?: Membership } = {};
	const event = {
		url,
		request: new Request(url, { method }),
		cookies: {
			get: () => undefined,
			set: (_name: string, value: string) => {
				chosen = value;
			}
		},
		locals
	} as unknown as RequestEvent;
	let location: string | null = null;
	try {
		await authentication({ event, resolve: () => new Response('') });
	} catch (thrown) {
		if (!isRedirect(thrown)) throw thrown;
		location = thrown.location;
	}
	return { location, chosen, actsIn: locals.membership?.organisationId };
}

describe('a link that names an organisation', () => {
	it('makes its reader act there, and goes on without the name', async () => {
		expect(await ask(`/reports/1/review?a=b&organisation=${away}`)).toEqual({
			location: '/reports/1/review?a=b',
			chosen: away,
			actsIn: undefined
		});
	});

	it('changes nothing for one who does not belong to it, nor for a form, nor for a stranger', async () => {
		const unchanged = { location: null, chosen: undefined, actsIn: home };
		expect(await ask(`/reports/1?organisation=${foreign}`)).toEqual(unchanged);
		expect(await ask('/reports/1?organisation=no-id')).toEqual(unchanged);
		expect(await ask(`/reports/1?organisation=${away}`, 'POST')).toEqual(unchanged);
		signedIn = false;
		expect(await ask(`/reports/1?organisation=${away}`)).toEqual({ ...unchanged, actsIn: undefined });
		signedIn = true;
	});
});
