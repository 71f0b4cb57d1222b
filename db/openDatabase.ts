import { statSync } from 'node:fs';
import Database from 'better-sqlite3';
import { drizzle } from 'drizzle-orm/better-sqlite3';
import type { BaseSQLiteDatabase } from 'drizzle-orm/sqlite-core';
import * as benches from './schema/benches.ts';
import * as packs from './schema/packs.ts';
import * as people from './schema/people.ts';
import * as waveforms from './schema/waveforms.ts';

const schema = { ...people, ...waveforms, ...benches, ...packs };

/** What a repo works on: the connection for reads, or the transaction of a write. Everything is synchronous. */
export type Queryable = BaseSQLiteDatabase<'sync', Database.RunResult, typeof schema>;

/** The database file is no longer the one that was opened. Writing would go to a file without a name. */
export class StoreGoneError extends Error {}

export interface Store {
  readonly db: Queryable;
  readonly sqlite: Database.Database;
  /** Runs `work` in one immediate transaction, after a look that the file is still there. Throws StoreGoneError where it is not. */
  write<T>(work: (tx: Queryable) => T): T;
  close(): void;
}

/** `onGone` hears of a vanished file once, so that the whole server can stop and not only the request that found it. */
export function openDatabase(file: string, onGone?: () => void): Store {
  const sqlite = new Database(file);
  sqlite.pragma('journal_mode = WAL');
  sqlite.pragma('synchronous = FULL'); // an answered save survives a power cut
  sqlite.pragma('foreign_keys = ON');
  sqlite.pragma('recursive_triggers = ON'); // else INSERT OR REPLACE would slip past the append-only triggers
  sqlite.pragma('busy_timeout = 5000');
  const db = drizzle(sqlite, { schema });
  const inode = statSync(file).ino;

  function requireFile(): void {
    const found = statSync(file, { throwIfNoEntry: false });
    if (found?.ino === inode) return;
    onGone?.();
    throw new StoreGoneError(`The database file ${file} vanished or was replaced.`);
  }

  return {
    db,
    sqlite,
    write(work) {
      requireFile();
      return db.transaction((tx) => work(tx), { behavior: 'immediate' });
    },
    close: () => sqlite.close(),
  };
}
