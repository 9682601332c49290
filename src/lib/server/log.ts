import pino, { type Logger } from 'pino';

/** Names whose values never reach a log, at the top of a logged object or one or two levels down. */
const secretNames = [
	'password',
	'currentPassword',
	'newPassword',
	'hash',
	'token',
	'sessionToken',
	'access_token',
	'refresh_token',
	'id_token',
	'secret',
	'authorization',
	'cookie',
	'sealedKey',
	'privateKey',
	'AUTH_SECRET',
	'SEALING_KEYS',
	'DATABASE_URL',
	'SMTP_URL',
	'connectionString'
];

/** A failed query's error quotes the values that were sent with it: mail addresses, hashes, texts. They are cut out. */
export function withoutQueryValues(text: string): string {
	return text.replace(/\nparams: [\s\S]*?(?=\n\s+at |\ncaused by: |$)/g, '');
}

function serializeError(error: unknown): unknown {
	if (!(error instanceof Error)) return error;
	const plain = pino.stdSerializers.err(error);
	delete plain.params;
	plain.message = withoutQueryValues(plain.message);
	plain.stack = withoutQueryValues(plain.stack);
	return plain;
}

/** A logger of its own on any stream; `log` below is the process's. */
export function createLog(destination?: pino.DestinationStream): Logger {
	const options: pino.LoggerOptions = {
		level: process.env.LOG_LEVEL ?? 'info',
		timestamp: pino.stdTimeFunctions.isoTime,
		redact: {
			paths: secretNames.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]),
			censor: '[withheld]'
		},
		serializers: { err: serializeError, error: serializeError }
	};
	return destination === undefined ? pino(options) : pino(options, destination);
}

/** The process's log: one JSON object per line on standard output. */
export const log: Logger = createLog();
