import { drizzle } from 'drizzle-orm/better-sqlite3';
import { migrate } from 'drizzle-orm/better-sqlite3/migrator';
import type { Store } from './openDatabase.ts';

/**
 * Brings the schema up to date. Foreign keys are off meanwhile, set outside the migrator's transaction (inside one the pragma
 * does nothing), since a table rebuild drops and renames; a check of every key follows before anything else may run.
 */
export function migrateDatabase(store: Pick<Store, 'sqlite'>, migrationsFolder: string): void {
  const { sqlite } = store;
  sqlite.pragma('foreign_keys = OFF');
  try {
    migrate(drizzle(sqlite), { migrationsFolder });
    const broken = sqlite.pragma('foreign_key_check') as unknown[];
    if (broken.length > 0) throw new Error(`A migration left ${broken.length} rows that point at nothing.`);
  } finally {
    sqlite.pragma('foreign_keys = ON');
  }
}
