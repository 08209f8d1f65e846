/** Copies of capture files, as they lay on the disk, compressed; told apart by their SHA-256. */
import type { DatabaseSyncInstance } from "@photostructure/sqlite";

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
