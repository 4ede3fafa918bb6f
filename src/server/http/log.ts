import pino from 'pino';

/** Structured lines without bodies, cookies or secrets. */
export const log = pino({ base: null, level: process.env['LOG_LEVEL'] ?? 'info' });
