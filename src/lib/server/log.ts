import pino, { type Logger } from 'pino';

let root: Logger | undefined;

/** One JSON line per event on standard output, level from LOG_LEVEL. Never give it a token, a password or a cookie. */
export function log(): Logger {
	return (root ??= pino({
		level: process.env.LOG_LEVEL ?? 'info',
		base: undefined,
		timestamp: pino.stdTimeFunctions.isoTime,
		redact: ['password', '*.password', 'cookie', '*.cookie', 'token', '*.token'],
	}));
}
