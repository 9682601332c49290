import { SvelteKitAuth, type SvelteKitAuthConfig } from '@auth/sveltekit';
import Credentials from '@auth/sveltekit/providers/credentials';
import { decode as stockDecode, encode as stockEncode } from '@auth/core/jwt';
import { isRedirect, type RequestEvent } from '@sveltejs/kit';
import { z } from 'zod';
import { sourceOf } from '../access/limit';
import { env } from '../env';
import { log } from '../log';
import type { Person } from './person';
import { absoluteDays, closeSession, findSession, openSession } from './sessions';
import { checkCredentials } from './sign-in';
import { hashToken } from './tokens';

/*
 * Auth.js with sessions of our own. Its "database" strategy refuses a configuration whose only provider is a password,
 * and its "jwt" strategy leaves nothing to revoke; so the strategy is "jwt" with the token's two ends replaced: what the
 * cookie holds is a random token, and a row in `sessions` stands behind it. Whatever provider signs somebody in passes
 * through here, and no user row ever reaches a callback.
 *
 * Its own pages and routes under /auth are not served: forms of ours call it (see `cleanEvent`).
 */

const days = 86_400;

function isSecure(): boolean {
	return new URL(env().ORIGIN).protocol === 'https:';
}

export function sessionCookie(): string {
	return isSecure() ? '__Host-noonmark-session' : 'noonmark-session';
}

/*
 * Auth.js takes a lookup that fails for a session that does not exist, and clears the cookie. While the database is away
 * nobody is signed out by that: the failure is kept here, by request, and thrown again outside.
 */
const failedLookups = new WeakMap<App.Locals, unknown>();

const typed = z.object({ email: z.string(), password: z.string() });

function configuration(event: RequestEvent): SvelteKitAuthConfig {
	const cookie = sessionCookie();
	return {
		trustHost: true,
		secret: env().AUTH_SECRET,
		basePath: '/auth',
		useSecureCookies: isSecure(),
		cookies: {
			sessionToken: {
				name: cookie,
				options: { httpOnly: true, sameSite: 'lax', path: '/', secure: isSecure() }
			}
		},
		pages: { signIn: '/sign-in', error: '/sign-in' },
		providers: [
			Credentials({
				credentials: { email: {}, password: {} },
				authorize: async (input) => checkCredentials(typed.parse(input), sourceOf(event.getClientAddress()))
			})
		],
		session: { strategy: 'jwt', maxAge: absoluteDays * days },
		jwt: {
			encode: async (params) => {
				if (params.salt !== cookie) return stockEncode(params);
				const kept = params.token?.kept;
				if (typeof kept === 'string') return kept;
				if (params.token?.sub === undefined) throw new Error('A session needs a person.');
				return openSession(params.token.sub, event.request.headers.get('user-agent') ?? '');
			},
			decode: async (params) => {
				if (params.salt !== cookie) return stockDecode(params);
				if (params.token === undefined) return null;
				const person = await findSession(params.token).catch((cause: unknown) => {
					failedLookups.set(event.locals, cause);
					return null;
				});
				if (person === null) return null;
				return { sub: person.id, name: person.name, email: person.email, kept: params.token };
			}
		},
		callbacks: {
			// Built afresh: nothing but these three may leave.
			session: ({ session, token }) => ({
				expires: session.expires,
				user: { id: token.sub ?? '', name: token.name ?? '', email: token.email ?? '' }
			})
		},
		events: {
			signOut: async (message) => {
				if ('token' in message && typeof message.token?.kept === 'string') {
					await closeSession(message.token.kept);
				}
			}
		},
		logger: {
			error: (cause) => log.debug({ reason: cause.name }, 'auth'),
			warn: (code) => log.debug({ code }, 'auth'),
			debug: () => undefined
		}
	};
}

const auth = SvelteKitAuth(async (event) => configuration(event));

/**
 * The event as Auth.js may see it: the configured origin instead of any host or forwarding header, a path that is none
 * of its own, and a form in place of the body. `locals` stays the real one, and cookies set reach the answer.
 */
function cleanEvent(event: RequestEvent, form?: Record<string, string>): RequestEvent {
	const origin = new URL(env().ORIGIN);
	const headers = new Headers({ host: origin.host, 'x-forwarded-host': origin.host });
	headers.set('x-forwarded-proto', origin.protocol.replace(':', ''));
	for (const name of ['cookie', 'user-agent']) {
		const value = event.request.headers.get(name);
		if (value !== null) headers.set(name, value);
	}
	const request =
		form === undefined
			? new Request(origin, { headers })
			: new Request(origin, { method: 'POST', headers, body: new URLSearchParams(form) });
	const cookies: RequestEvent['cookies'] = {
		...event.cookies,
		set: (name, value, options) => {
			// Where to go afterwards is our forms' business, not a cookie's.
			if (name.endsWith('authjs.callback-url')) return;
			// Auth.js leaves Secure out where it is not wanted, and SvelteKit would then take its own default.
			event.cookies.set(name, value, { ...options, secure: isSecure() });
		}
	};
	return { ...event, cookies, request, url: origin };
}

/** The signed-in person and the id of their session, or null. Renews the cookie. */
export async function readSession(
	event: RequestEvent
): Promise<{ person: Person; sessionId: string } | null> {
	const token = event.cookies.get(sessionCookie());
	if (token === undefined || token === '') return null;
	const clean = cleanEvent(event);
	await auth.handle({ event: clean, resolve: () => new Response() });
	const session = await event.locals.auth();
	if (failedLookups.has(event.locals)) throw failedLookups.get(event.locals);
	const user = session?.user;
	if (!user?.id) return null;
	return {
		person: { id: user.id, name: user.name ?? '', email: user.email ?? '' },
		sessionId: hashToken(token)
	};
}

/** Auth.js answers by a thrown redirect and wraps what its callbacks throw; this undoes both. */
async function settle(work: unknown): Promise<void> {
	try {
		await work;
	} catch (thrown) {
		if (isRedirect(thrown)) return;
		const cause = thrown instanceof Error ? thrown.cause : undefined;
		if (typeof cause === 'object' && cause !== null && 'err' in cause) throw cause.err;
		throw thrown;
	}
}

/**
 * Signs in by address and password; a session that the browser had before ends.
 * @throws what `checkCredentials` throws
 */
export async function signIn(event: RequestEvent, input: { email: string; password: string }): Promise<void> {
	const before = event.cookies.get(sessionCookie());
	await settle(auth.signIn(cleanEvent(event, { providerId: 'credentials', redirectTo: '/', ...input })));
	if (before !== undefined && before !== event.cookies.get(sessionCookie())) await closeSession(before);
}

/** Ends the session of this browser. */
export async function signOut(event: RequestEvent): Promise<void> {
	await settle(auth.signOut(cleanEvent(event, { redirectTo: '/' })));
}
