import pino from 'pino';

/** The process's log: JSON lines on standard output, secrets left out by path. */
export const log = pino({
  level: process.env.LOG_LEVEL ?? 'info',
  redact: ['password', 'token', 'req.headers.cookie', 'req.headers.authorization'],
});
