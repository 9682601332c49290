import { log } from '../log';

/** Fills in what the server's environment needs and a test does not care about; call it before the first `env()`. */
export function setTestEnvironment(given: Record<string, string> = {}): void {
	log.level = 'silent';
	Object.assign(process.env, {
		DATABASE_URL: 'postgres://nobody@127.0.0.1:1/none',
		ORIGIN: 'https://noonmark.example',
		AUTH_SECRET: 'a secret of more than 32 characters',
		SEALING_KEYS: `k1:${Buffer.alloc(32).toString('base64')}`,
		SMTP_URL: 'smtp://127.0.0.1:1',
		STRIPE_SECRET_KEY: 'sk_test_tests',
		STRIPE_WEBHOOK_SECRET: 'whsec_tests',
		STRIPE_API_URL: 'http://127.0.0.1:1',
		...given
	});
}
