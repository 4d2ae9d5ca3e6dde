import pino, { type Logger } from 'pino';
import { config } from './config';

/** Names under which a secret could reach the log; whatever stands there is replaced. */
const SECRET_FIELDS = ['password', 'token', 'cookie', 'authorization', 'secret', 'secretKey', 'smtpUrl'];

let logger: Logger | null = null;

/** The process's log: one JSON line an event on standard output, secrets redacted. */
export function log(): Logger {
	logger ??= pino({
		level: config().logLevel,
		base: null,
		timestamp: pino.stdTimeFunctions.isoTime,
		redact: {
			paths: SECRET_FIELDS.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]),
			censor: '[redacted]'
		}
	});
	return logger;
}
