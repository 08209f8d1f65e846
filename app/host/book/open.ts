import { existsSync, mkdirSync } from "node:fs";
import { dirname } from "node:path";
import { DatabaseSync, type DatabaseSyncInstance } from "@photostructure/sqlite";
import { version } from "../../../package.json";
import { CallError } from "../failure.ts";
import { migrations } from "./schema.ts";

/** Tells a bench book from any other SQLite file ("RBok" in ASCII). */
const applicationId = 0x52426f6b;
const waitForOthers_ms = 5000;

export interface OpenedBook {
  db: DatabaseSyncInstance;
  readOnly: boolean;
  /** What the user should know of how the book was opened. */
  note: string | null;
}

/** Opens or makes the book. A damaged one, or one that can't be written, opens read-only and says so. */
export function openDatabase(path: string): OpenedBook {
  const isNew = !existsSync(path);
  try {
    if (isNew) mkdirSync(dirname(path), { recursive: true });
    const db = new DatabaseSync(path, { timeout: waitForOthers_ms });
    try {
      return prepare(db, isNew);
    } catch (error) {
      db.close();
      throw error;
    }
  } catch (error) {
    if (error instanceof CallError) throw error;
    if (isNew) throw cannotMake(path, error);
    return openReadOnly(path, error);
  }
}

function prepare(db: DatabaseSyncInstance, isNew: boolean): OpenedBook {
  const journal = String(pragma(db, "journal_mode = WAL"));
  db.exec("PRAGMA synchronous = FULL; PRAGMA foreign_keys = ON");
  if (!isNew) checkKind(db);
  migrate(db);
  touchTables(db);
  const note =
    journal === "wal"
      ? null
      : "this place has no write-ahead log (a network share?): the book uses a rollback journal, and others wait while it is written";
  return { db, readOnly: false, note };
}

/** A damaged page is better met now than in the middle of a run; a full check would take minutes. */
function touchTables(db: DatabaseSyncInstance) {
  for (const table of [
    "runs",
    "captures",
    "readings",
    "pulses",
    "trail",
    "problems",
    "preferences",
    "answers",
    "originals",
    "companions",
  ])
    db.prepare(`SELECT * FROM ${table} LIMIT 1`).get();
}

function checkKind(db: DatabaseSyncInstance) {
  const id = Number(pragma(db, "application_id"));
  const tables = db.prepare("SELECT count(*) AS n FROM sqlite_schema").get() as { n: number };
  if (id !== applicationId && tables.n > 0)
    throw new CallError("not-a-book", "this file is a database, but no bench book. Name another file");
}

/** All missing migrations and the version's row in one transaction. */
function migrate(db: DatabaseSyncInstance) {
  const has = versionOf(db);
  if (has === migrations.length) return;
  if (has > migrations.length)
    throw new CallError(
      "newer-book",
      `this book was written by a newer Ringbook (its format is ${has}, this program knows ${migrations.length}). Use the newer program; nothing was changed`,
    );
  db.exec("BEGIN IMMEDIATE");
  try {
    // Another program may have been faster while this one waited.
    for (let next = versionOf(db); next < migrations.length; next++) {
      if (next === 0)
        db.exec(
          "CREATE TABLE versions (version INTEGER PRIMARY KEY, at TEXT NOT NULL, program TEXT NOT NULL) STRICT",
        );
      db.exec(migrations[next]);
      db.prepare("INSERT INTO versions VALUES (?, ?, ?)").run(next + 1, new Date().toISOString(), version);
    }
    db.exec(`PRAGMA application_id = ${applicationId}`);
    db.exec("COMMIT");
  } catch (error) {
    db.exec("ROLLBACK");
    throw error;
  }
}

function versionOf(db: DatabaseSyncInstance): number {
  const table = db.prepare("SELECT 1 FROM sqlite_schema WHERE type = 'table' AND name = 'versions'").get();
  if (!table) return 0;
  const row = db.prepare("SELECT max(version) AS version FROM versions").get() as { version: number | null };
  return row.version ?? 0;
}

function openReadOnly(path: string, cause: unknown): OpenedBook {
  const why = (cause as Error).message;
  try {
    const db = new DatabaseSync(path, { readOnly: true, timeout: waitForOthers_ms });
    checkKind(db);
    db.prepare("SELECT count(*) FROM runs").get();
    return {
      db,
      readOnly: true,
      note: `the book is open for reading only (${why}). Nothing new is kept; copy it to a place that can be written, or take up a backup`,
    };
  } catch (error) {
    if (error instanceof CallError) throw error;
    throw new CallError(
      "damaged-book",
      `the book ${path} can't be read (${why}). Take up a backup, or name another book`,
    );
  }
}

const cannotMake = (path: string, cause: unknown) =>
  new CallError(
    "no-book",
    `a book can't be made at ${path} (${(cause as Error).message}). Name another place with --book`,
  );

/** A pragma's one value; the answer's column has the pragma's own name. */
function pragma(db: DatabaseSyncInstance, text: string): unknown {
  const row = db.prepare(`PRAGMA ${text}`).get() as Record<string, unknown> | undefined;
  return row?.[text.split(" ")[0]];
}
