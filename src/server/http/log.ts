import pino from 'pino';

/** Structured lines without bodies, cookies or secrets; LOG_LEVEL=info adds one a request. */
export const log = pino({ base: null, level: process.env['LOG_LEVEL'] ?? 'warn' });
