import { StartRefused, type Config } from './config.ts';

const folderWords: Record<string, string> = {
  EEXIST: 'is a file, not a directory',
  ENOTDIR: 'lies under a file, not a directory',
  EACCES: 'may not be used by this user',
  EPERM: 'may not be used by this user',
  EROFS: 'lies on a disk that cannot be written',
  ENOSPC: 'lies on a disk that is full',
  SQLITE_CANTOPEN: 'may not be used by this user',
  SQLITE_READONLY: 'may not be written by this user',
  SQLITE_FULL: 'lies on a disk that is full',
};

/** Why the data directory cannot be opened, for the person at the terminal; anything else stays an error with its stack. */
export function openingRefusal(error: unknown, { dataDir }: Config): unknown {
  const code = String((error as { code?: unknown } | null)?.code).replace(/^(SQLITE_[A-Z]+)_.*$/, '$1');
  if (code === 'SQLITE_NOTADB' || code === 'SQLITE_CORRUPT') {
    return new StartRefused(
      `A database in ${dataDir} cannot be read: it is damaged or no database. Put a back-up in its place, or set DATA_DIR to another directory.`,
    );
  }
  const words = folderWords[code];
  return words ? new StartRefused(`${dataDir} ${words}. Set DATA_DIR to another directory.`) : error;
}
