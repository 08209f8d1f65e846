/**
 * Copies of capture files and of what was read along with them, as they lay on the disk, compressed; told
 * apart by their SHA-256.
 */
import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import type { Companion } from "../reading/index.ts";

export function originalsOf(db: DatabaseSyncInstance) {
  const one = db.prepare("SELECT gz FROM originals WHERE sha256 = ?");
  const known = db.prepare("SELECT 1 FROM originals WHERE sha256 = ?");
  const add = db.prepare("INSERT OR IGNORE INTO originals VALUES (?, ?, ?)");
  return {
    has: (sha256: string) => known.get(sha256) !== undefined,
    get: (sha256: string) => (one.get(sha256) as { gz: Uint8Array } | undefined)?.gz ?? null,
    add: (sha256: string, bytes: number, gz: Uint8Array) => void add.run(sha256, bytes, gz),
  };
}

/** What was read along with a capture file; nothing is known of it in a book of an older format, opened read-only. */
export function companionsOf(db: DatabaseSyncInstance): (sha256: string) => Companion[] {
  const known = db.prepare("SELECT 1 FROM sqlite_master WHERE name = 'companions'").get();
  if (!known) return () => [];
  const along = db.prepare("SELECT name, sha256 FROM companions WHERE capture = ? ORDER BY name");
  return (sha256) => along.all(sha256) as unknown as Companion[];
}
