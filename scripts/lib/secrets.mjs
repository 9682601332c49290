import { randomBytes, randomInt } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { dataFolder } from './paths.mjs';

/**
 * @typedef {object} Secrets
 * @property {string} AUTH_SECRET
 * @property {string} SEALING_KEYS seals private keys; losing it loses the certificates in the database
 * @property {string} databasePassword
 * @property {string} databaseKeeperPassword of the cluster's superuser, which the service itself never uses
 * @property {string} demoPassword of the demo's people
 * @property {string} STRIPE_SECRET_KEY of the local stand-in for payments
 * @property {string} STRIPE_WEBHOOK_SECRET
 */

const words = (
	'amber arch basalt birch bright cedar chalk cinder clay cliff cloud copper coral delta dune ember fern field flint ' +
	'gable garden granite gravel harbour hazel heath indigo ivory juniper larch lichen lime linen lintel maple marble ' +
	'meadow mica moss noon oak ochre olive orchard pebble pine plaster quartz rafter reed ridge river sand shale shingle ' +
	'slate spruce stone terrace thatch tile timber valley willow'
).split(' ');

function passphrase() {
	return [...Array(4)].map(() => words[randomInt(words.length)]).join('-');
}

/** @returns {Secrets} */
export function makeSecrets() {
	return {
		AUTH_SECRET: randomBytes(48).toString('base64url'),
		SEALING_KEYS: `k1:${randomBytes(32).toString('base64')}`,
		databasePassword: randomBytes(24).toString('base64url'),
		databaseKeeperPassword: randomBytes(24).toString('base64url'),
		demoPassword: passphrase(),
		STRIPE_SECRET_KEY: `sk_test_${randomBytes(24).toString('hex')}`,
		STRIPE_WEBHOOK_SECRET: `whsec_${randomBytes(24).toString('hex')}`
	};
}

/** Secrets of this checkout, made at the first start and kept readable by their owner alone. @returns {Secrets} */
export function keptSecrets() {
	const file = join(dataFolder, 'secrets.json');
	/** @type {Partial<Secrets>} */
	const kept = existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : {};
	const made = { ...makeSecrets(), ...kept };
	if (Object.keys(made).length !== Object.keys(kept).length) {
		writeFileSync(file, `${JSON.stringify(made, null, '\t')}\n`, { mode: 0o600 });
	}
	return made;
}
