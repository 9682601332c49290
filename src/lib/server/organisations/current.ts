import type { Cookies } from '@sveltejs/kit';
import { env } from '../env';

function isSecure(): boolean {
	return new URL(env().ORIGIN).protocol === 'https:';
}

function cookieName(): string {
	return isSecure() ? '__Host-noonmark-organisation' : 'noonmark-organisation';
}

/** Remembers which of their organisations a person acts in. Only a wish: it is checked against memberships each time. */
export function chooseOrganisation(cookies: Cookies, organisationId: string): void {
	cookies.set(cookieName(), organisationId, {
		path: '/',
		httpOnly: true,
		sameSite: 'lax',
		secure: isSecure(),
		maxAge: 365 * 86_400
	});
}

/** The remembered id, or null when there is none that looks like one. */
export function chosenOrganisation(cookies: Cookies): string | null {
	const id = cookies.get(cookieName());
	return id !== undefined && /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/.test(id) ? id : null;
}
