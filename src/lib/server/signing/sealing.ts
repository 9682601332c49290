import { createCipheriv, createDecipheriv, randomBytes } from 'node:crypto';
import { env } from '../env';

const cipherName = 'aes-256-gcm';
const form = 'v1';

interface SealingKey {
	id: string;
	key: Buffer;
}

/** Keys that seal and open, newest first. */
export interface Sealer {
	/** Seals with the newest key. `purpose` must be given again to open: a sealed text cannot be moved elsewhere. */
	seal(secret: Uint8Array, purpose: string): string;
	/** @throws Error if the key is not listed, the purpose is another, or the text was changed. */
	open(sealed: string, purpose: string): Buffer;
	/** True where the newest key did not seal it. */
	isStale(sealed: string): boolean;
}

function readKeys(list: string): SealingKey[] {
	const keys = list.split(',').map((entry) => {
		const [, id, base64] = /^([A-Za-z0-9_-]+):([A-Za-z0-9+/]+={0,2})$/.exec(entry.trim()) ?? [];
		if (id === undefined || base64 === undefined) {
			throw new Error('SEALING_KEYS must list entries of the form id:base64, separated by commas.');
		}
		const key = Buffer.from(base64, 'base64');
		if (key.length !== 32) throw new Error(`The sealing key "${id}" must have 32 bytes.`);
		return { id, key };
	});
	if (new Set(keys.map((k) => k.id)).size !== keys.length) {
		throw new Error('SEALING_KEYS lists the same id twice.');
	}
	return keys;
}

/**
 * AES-256-GCM under the given keys. The text reads `v1.<key id>.<nonce>.<ciphertext>.<tag>`, parts in base64url.
 * @param list `id:base64` of 32 bytes each, newest first, separated by commas.
 */
export function createSealer(list: string): Sealer {
	const keys = readKeys(list);
	const newest = keys[0] as SealingKey;
	const bind = (id: string, purpose: string): Buffer => Buffer.from([form, id, purpose].join('\n'), 'utf8');
	return {
		seal(secret, purpose) {
			// A random 96-bit nonce is sound for the few thousand seals that one key will ever make.
			const nonce = randomBytes(12);
			const cipher = createCipheriv(cipherName, newest.key, nonce).setAAD(bind(newest.id, purpose));
			const hidden = Buffer.concat([cipher.update(secret), cipher.final()]);
			const parts = [nonce, hidden, cipher.getAuthTag()].map((part) => part.toString('base64url'));
			return [form, newest.id, ...parts].join('.');
		},
		open(sealed, purpose) {
			const [version, id = '', ...rest] = sealed.split('.');
			const [nonce, hidden, tag] = rest.map((part) => Buffer.from(part, 'base64url'));
			if (version !== form || rest.length !== 3 || !nonce || !hidden || tag?.length !== 16) {
				throw new Error('The sealed text is malformed.');
			}
			const found = keys.find((key) => key.id === id);
			if (found === undefined) {
				throw new Error(
					`The sealing key "${id}" is not listed in SEALING_KEYS; add it behind the newest one.`
				);
			}
			const decipher = createDecipheriv(cipherName, found.key, nonce)
				.setAAD(bind(id, purpose))
				.setAuthTag(tag);
			try {
				return Buffer.concat([decipher.update(hidden), decipher.final()]);
			} catch {
				throw new Error('The sealed text does not open: it was changed, or belongs to another place or key.');
			}
		},
		isStale: (sealed) => sealed.split('.')[1] !== newest.id
	};
}

let own: { list: string; sealer: Sealer } | undefined;

/** The sealer of the process, from SEALING_KEYS. */
export function sealer(): Sealer {
	const list = env().SEALING_KEYS;
	if (own?.list !== list) own = { list, sealer: createSealer(list) };
	return own.sealer;
}
