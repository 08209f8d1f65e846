import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import { CallError } from "../failure.ts";

/** All of it or nothing; what the disk says becomes a text for people. */
export function transaction<T>(db: DatabaseSyncInstance, work: () => T): T {
  try {
    db.exec("BEGIN IMMEDIATE");
  } catch (error) {
    throw describe(error);
  }
  try {
    const answer = work();
    db.exec("COMMIT");
    return answer;
  } catch (error) {
    if (db.isTransaction) db.exec("ROLLBACK");
    throw describe(error);
  }
}

/** SQLite's primary result codes that a bench meets. */
const advice: Record<number, [code: string, text: string]> = {
  5: ["book-busy", "another program is writing to the book. Wait until it is done, then try again"],
  8: ["book-read-only", "the book is open for reading only. Copy it to a place that can be written"],
  10: ["book-io", "the disk does not take the book's pages. Check the disk, then try again"],
  11: ["damaged-book", "the book is damaged. Take up a backup"],
  13: ["disk-full", "the disk is full. Free some space, then try again; what was kept before is safe"],
};

function describe(error: unknown): unknown {
  const { errcode } = error as { errcode?: number };
  const known = typeof errcode === "number" ? advice[errcode & 0xff] : undefined;
  return known ? new CallError(...known) : error;
}
