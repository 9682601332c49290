import type { Cookies } from '@sveltejs/kit';
import { env } from '../env';

/* The address just typed, so that the next page need not ask for it again. It opens nothing. */

const name = 'noonmark-address';

export function rememberAddress(cookies: Cookies, email: string): void {
	cookies.set(name, email, {
		path: '/sign-up',
		httpOnly: true,
		sameSite: 'lax',
		secure: new URL(env().ORIGIN).protocol === 'https:',
		maxAge: 3600
	});
}

export function rememberedAddress(cookies: Cookies): string {
	return cookies.get(name) ?? '';
}
