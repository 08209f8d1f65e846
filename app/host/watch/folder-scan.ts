import { readdir, stat } from "node:fs/promises";
import { join } from "node:path";

export interface FolderScan {
  /** Looks once; answers the files that have become complete since the last look, by name. */
  look(): Promise<string[]>;
}

export interface ScanOptions {
  wanted(name: string): boolean;
  /** A file is complete when it has not changed for so long. */
  settle_ms: number;
  /** What was read before (an earlier start of the program): true for a file that need not be read. */
  known(path: string, bytes: number, changed_ms: number): boolean;
  now?(): number;
}

interface Seen {
  bytes: number;
  changed_ms: number;
  inode: number;
  /** Since when it is as it is. */
  since: number;
  done: boolean;
}

/** Complete files are looked at in turn, this many a look: a full folder costs no more than a new one. */
const doneLookedAt = 200;

/**
 * Finds complete files by looking, not by the system's change events, which network shares don't send.
 * A file that changes after it was read (its writer had paused) is complete once more later; a file that
 * was merely renamed is not read again.
 */
export function createFolderScan(folder: string, options: ScanOptions): FolderScan {
  const now = options.now ?? Date.now;
  const seen = new Map<string, Seen>();
  let turn = 0;

  async function lookAt(name: string): Promise<boolean> {
    const path = join(folder, name);
    const info = await stat(path).catch(() => null);
    if (!info?.isFile()) {
      seen.delete(name);
      return false;
    }
    const fresh = { bytes: info.size, changed_ms: info.mtimeMs, inode: info.ino, since: now(), done: false };
    const before = seen.get(name) ?? renamed(fresh);
    if (!before && options.known(path, fresh.bytes, fresh.changed_ms)) fresh.done = true;
    if (!before || before.bytes !== fresh.bytes || before.changed_ms !== fresh.changed_ms) {
      seen.set(name, fresh);
      return false;
    }
    seen.set(name, before);
    if (before.done || before.bytes === 0 || now() - before.since < options.settle_ms) return false;
    before.done = true;
    return true;
  }

  /** The same file under its former name, which is gone. */
  function renamed(fresh: Seen): Seen | undefined {
    for (const [name, old] of seen)
      if (old.inode === fresh.inode && old.bytes === fresh.bytes && old.changed_ms === fresh.changed_ms) {
        seen.delete(name);
        return old;
      }
    return undefined;
  }

  return {
    async look() {
      const names = (await readdir(folder)).filter((name) => options.wanted(name));
      const there = new Set(names);
      const open = names.filter((name) => !seen.get(name)?.done);
      const done = names.filter((name) => seen.get(name)?.done);
      turn = done.length === 0 ? 0 : turn % done.length;
      const inTurn = done.slice(turn, turn + doneLookedAt);
      turn += doneLookedAt;
      const complete: string[] = [];
      for (const name of [...open, ...inTurn]) if (await lookAt(name)) complete.push(name);
      // Only after the new names have been looked at: a renamed file is found by its former one.
      for (const name of seen.keys()) if (!there.has(name)) seen.delete(name);
      return complete.toSorted();
    },
  };
}
