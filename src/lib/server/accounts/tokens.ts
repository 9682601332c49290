import { createHash, randomBytes } from 'node:crypto';

/** A secret of 256 random bits, safe in a URL and in a cookie. */
export function newToken(): string {
	return randomBytes(32).toString('base64url');
}

/** What the database keeps of a token. Plain SHA-256 is enough: the token itself cannot be guessed. */
export function hashToken(token: string): string {
	return createHash('sha256').update(token).digest('hex');
}
