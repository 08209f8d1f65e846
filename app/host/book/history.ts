/** How a run's readings came about: who read it when, and what was stated meanwhile. */
import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import type { Setup } from "../../../analysis/setup/schema.ts";
import { parse } from "./rows.ts";
import { standing } from "./trail.ts";

export interface RunHistory {
  /** Versions whose readings stand, with the time of the latest (ISO, UTC). */
  read: { version: string; at: string }[];
  /** Readings that these replaced; the book keeps them. */
  earlier: number;
  /** Everything the user had stated of the run at that time; `taken` back by a later step or not. */
  statements: { at: string; stated: Setup; takenBack: boolean }[];
}

export function historyOf(db: DatabaseSyncInstance): (run: number) => RunHistory {
  const read = db.prepare(
    `SELECT version, max(at) AS at FROM captures JOIN readings ON readings.id = captures.reading
     WHERE run = ? AND position >= 0 GROUP BY version ORDER BY at`,
  );
  const earlier = db.prepare(
    `SELECT count(*) AS n FROM captures JOIN readings ON readings.capture = captures.id
     WHERE run = ? AND position >= 0 AND readings.id <> captures.reading`,
  );
  const statements = db.prepare(
    `SELECT at, stated, NOT ${standing} AS takenBack FROM trail WHERE run = ? AND kind = 'setup' ORDER BY id`,
  );
  return (run) => ({
    read: read.all(run) as unknown as RunHistory["read"],
    earlier: (earlier.get(run) as { n: number }).n,
    statements: (statements.all(run) as { at: string; stated: string; takenBack: number }[]).map(
      ({ at, stated, takenBack }) => ({ at, stated: parse<Setup>(stated), takenBack: takenBack === 1 }),
    ),
  });
}
