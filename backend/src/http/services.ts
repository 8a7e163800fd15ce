import type { Logger } from 'pino';
import type { Config } from '../config.js';
import type { Database } from '../db/database.js';

/** What every feature may use; made once in main.ts, made small in tests. */
export interface Services {
  readonly config: Config;
  readonly database: Database;
  readonly log: Logger;
  /** The time, so that tests may set it. */
  readonly now: () => Date;
}

/** The signed-in person that a request acts for. */
export interface Caller {
  readonly personId: string;
  readonly name: string;
  readonly sessionId: string;
}
