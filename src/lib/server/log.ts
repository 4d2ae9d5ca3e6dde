import pino, { type DestinationStream, type Logger, type LoggerOptions } from 'pino';
import { config } from './config';

/** Names under which a secret could reach the log; whatever stands there is replaced. */
const SECRET_FIELDS = ['password', 'token', 'cookie', 'authorization', 'secret', 'secretKey', 'smtpUrl'];

/**
 * What the log says of an error. Sequelize's carry the statement with its values (texts of incidents, hashes of
 * passwords) in fields of their own: those stay out.
 */
function describeError(error: unknown): unknown {
	if (!(error instanceof Error)) return error;
	const code = 'code' in error ? error.code : undefined;
	const cause = error.cause === undefined ? undefined : describeError(error.cause);
	return { type: error.name, message: error.message, code, stack: error.stack, cause };
}

const OPTIONS: LoggerOptions = {
	base: null,
	timestamp: pino.stdTimeFunctions.isoTime,
	serializers: { err: describeError, error: describeError },
	redact: {
		paths: SECRET_FIELDS.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]),
		censor: '[redacted]'
	}
};

/** A log of its own, for a destination that a caller watches. */
export function makeLog(level: string, destination?: DestinationStream): Logger {
	return pino({ ...OPTIONS, level }, destination ?? pino.destination(1));
}

let logger: Logger | null = null;

/** The process's log: one JSON line an event on standard output, secrets redacted. */
export function log(): Logger {
	logger ??= makeLog(config().logLevel);
	return logger;
}
