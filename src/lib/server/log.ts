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

/** A logger of its own on any stream; `log` below is the process's. */
export function createLog(destination?: pino.DestinationStream): Logger {
	const options: pino.LoggerOptions = {
		level: process.env.LOG_LEVEL ?? 'info',
		timestamp: pino.stdTimeFunctions.isoTime,
		redact: {
			paths: secretNames.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]),
			censor: '[withheld]'
		},
		serializers: { err: pino.stdSerializers.err, error: pino.stdSerializers.err }
	};
	return destination === undefined ? pino(options) : pino(options, destination);
}

/** The process's log: one JSON object per line on standard output. */
export const log: Logger = createLog();
