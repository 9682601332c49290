import { hash, verify } from '@node-rs/argon2';
import { newToken } from './tokens';

/** Argon2id (the library's default variant) at the least cost that OWASP's password storage sheet recommends. */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

/** The same text typed on two keyboards must be the same password. */
function prepared(password: string): string {
	return password.normalize('NFC');
}

export async function hashPassword(password: string): Promise<string> {
	return hash(prepared(password), cost);
}

let decoy: Promise<string> | undefined;

/**
 * Compares a password with a stored hash. Without a hash (nobody has that address) the same work is done on a decoy,
 * so that the time taken does not tell who has an account.
 */
export async function verifyPassword(stored: string | undefined, password: string): Promise<boolean> {
	decoy ??= hashPassword(newToken());
	const same = await verify(stored ?? (await decoy), prepared(password));
	return same && stored !== undefined;
}

/** @returns whether a stored hash was made at less than today's cost, or with another variant. */
export function isWeakHash(stored: string): boolean {
	const found = /^\$argon2id\$v=19\$m=(\d+),t=(\d+),p=(\d+)\$/.exec(stored);
	if (found === null) return true;
	return Number(found[1]) < cost.memoryCost || Number(found[2]) < cost.timeCost;
}
