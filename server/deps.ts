import type { Logger } from 'pino';
import type { Store } from '@/db/openDatabase';
import type { Config } from './config.ts';

export interface Clock {
  nowMs(): number;
}

/** Long work asks it before going on, and says what must end before the process does. */
export interface Lifecycle {
  readonly isStopping: boolean;
  /** Runs at the stop, newest first, within the 5 s that a stop may take. */
  onStop(task: () => void | Promise<void>): void;
  /** Asks for the end of the process; the reason is said to whoever runs it. */
  requestStop(reason: string): void;
}

/** Everything a service takes from outside; tests hand in a fake clock, a temporary directory and a quiet log. */
export interface Deps {
  readonly config: Config;
  readonly clock: Clock;
  readonly store: Store;
  readonly log: Logger;
  readonly lifecycle: Lifecycle;
  /** A new ULID at the clock's time. */
  newId(): string;
}
