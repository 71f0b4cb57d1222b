import path from 'node:path';
import Database from 'better-sqlite3';

export interface DataDirLock {
  release(): void;
}

/**
 * Takes DATA_DIR/lock.db for this process; null where another one holds it. The system frees the lock when a process dies,
 * so no stale file ever keeps a start from happening.
 */
export function lockDataDir(dataDir: string): DataDirLock | null {
  const lock = new Database(path.join(dataDir, 'lock.db'), { timeout: 0 });
  try {
    // A rollback journal: in WAL mode an exclusive lock would be taken lazily.
    lock.pragma('journal_mode = DELETE');
    lock.pragma('locking_mode = EXCLUSIVE');
    lock.exec('BEGIN EXCLUSIVE');
    lock.exec('CREATE TABLE IF NOT EXISTS held (at_ms INTEGER NOT NULL)');
    lock.exec('COMMIT'); // in exclusive mode the file lock outlives the transaction
    return { release: () => lock.close() };
  } catch (error) {
    lock.close();
    // by its code: the class is not one and the same where the package was loaded twice
    if (String((error as { code?: unknown }).code).startsWith('SQLITE_BUSY')) return null;
    throw error;
  }
}
