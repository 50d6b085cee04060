import pino from 'pino';

/** Structured log on standard output. Never log a key, a session, a mail address or a body. */
export const logger = pino({
	level: process.env.LOG_LEVEL ?? 'info',
	base: null,
	redact: ['authorization', 'cookie', '*.authorization', '*.cookie']
});
