import { Logger } from 'graphile-worker';
import { log } from '../log';

const LEVELS = { error: 'error', warning: 'warn', info: 'debug', debug: 'debug' } as const;

/** The job library's words in our log. */
export const logger = new Logger(() => (level, message) => {
  log[LEVELS[level]]({ from: 'jobs' }, message);
});
