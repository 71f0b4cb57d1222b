import { spawnSync } from 'node:child_process';
import { appendFileSync, mkdtempSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';

export interface SmallDisk {
  folder: string;
  /** What a shell does before it starts the program that meets the full disk. */
  before: string;
  /** Somebody else takes what is left of the disk. */
  fill(): void;
  remove(): void;
}

const run = (command: string, ...args: string[]) => spawnSync(command, args).status === 0;

/**
 * A disk of `megabytes`: a tmpfs where the system lets us mount one (root). Elsewhere a folder, and the program may write no file of more
 * than a tenth of that: the write is refused with an error of the same kind.
 */
export function openSmallDisk(megabytes: number): SmallDisk {
  const folder = mkdtempSync(path.join(os.tmpdir(), 'combwright-disk-'));
  const isMounted = run('mount', '-t', 'tmpfs', '-o', `size=${megabytes}m`, 'tmpfs', folder);
  return {
    folder,
    before: isMounted ? '' : `trap '' XFSZ; ulimit -f ${Math.round(megabytes * 102.4)}`,
    fill() {
      if (!isMounted) return;
      for (const bytes of [2 ** 20, 2 ** 12])
        try {
          for (;;) appendFileSync(path.join(folder, 'ballast'), Buffer.alloc(bytes));
        } catch (error) {
          if ((error as NodeJS.ErrnoException).code !== 'ENOSPC') throw error;
        }
    },
    remove() {
      if (isMounted) run('umount', '--lazy', folder);
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
