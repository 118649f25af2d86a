import { pino } from 'pino';

/** Structured log of one process; lines carry `requestId` where a request caused them. */
export const log = pino({
  level: process.env['LOG_LEVEL'] ?? 'info',
  base: { process: process.env['RIGWRIGHT_PROCESS'] ?? 'app' },
  redact: ['*.password', '*.token', '*.authorization'],
});
