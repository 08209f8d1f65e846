import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import type { Ruling, Verdict } from "../../../analysis/reading-format.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import { CallError } from "../failure.ts";
import { parse } from "./rows.ts";

/** A row of the append-only trail that no later row takes back. */
export const standing = "NOT EXISTS (SELECT 1 FROM trail AS later WHERE later.undoes = trail.id)";

const now = () => new Date().toISOString();

export interface Trail {
  /** What the user stated for a run, as it stands; null when nothing. */
  stated(run: number): Setup | null;
  /** Answers the row's id. */
  addSetup(run: number, stated: Setup): number;
  ruling(capture: number, pulse: number): Ruling | null;
  addRuling(
    run: number,
    capture: number,
    pulse: number,
    verdict: Verdict | null,
    remark: string,
  ): Ruling | null;
  canUndo(run: number): boolean;
  /** Takes the run's last standing statement or ruling back, by a row of its own. */
  undo(run: number): { kind: "setup" | "ruling"; capture: number | null; pulse: number | null };
}

export function trailOf(db: DatabaseSyncInstance): Trail {
  const setup = db.prepare(
    `SELECT stated FROM trail WHERE run = ? AND kind = 'setup' AND ${standing} ORDER BY id DESC LIMIT 1`,
  );
  const ruled = db.prepare(
    `SELECT verdict, at, remark FROM trail WHERE capture = ? AND pulse = ? AND kind = 'ruling' AND ${standing}
     ORDER BY id DESC LIMIT 1`,
  );
  const last = db.prepare(
    `SELECT id, kind, capture, pulse FROM trail WHERE run = ? AND kind <> 'undo' AND ${standing}
     ORDER BY id DESC LIMIT 1`,
  );
  const add = db.prepare(
    `INSERT INTO trail (run, kind, at, capture, pulse, verdict, remark, stated, undoes)
     VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?)`,
  );
  const ruling = (capture: number, pulse: number) => {
    const row = ruled.get(capture, pulse) as
      | { verdict: Verdict | null; at: string; remark: string }
      | undefined;
    return row?.verdict ? { verdict: row.verdict, at: row.at, remark: row.remark } : null;
  };
  return {
    stated(run) {
      const row = setup.get(run) as { stated: string } | undefined;
      return row ? parse<Setup>(row.stated) : null;
    },
    addSetup(run, stated) {
      const row = add.run(run, "setup", now(), null, null, null, null, JSON.stringify(stated), null);
      return Number(row.lastInsertRowid);
    },
    ruling,
    addRuling(run, capture, pulse, verdict, remark) {
      add.run(run, "ruling", now(), capture, pulse, verdict, remark, null, null);
      return ruling(capture, pulse);
    },
    canUndo: (run) => last.get(run) !== undefined,
    undo(run) {
      const row = last.get(run) as ReturnType<Trail["undo"]> & { id: number };
      if (!row) throw new CallError("nothing-to-undo", "there is nothing to take back in this run");
      add.run(run, "undo", now(), row.capture, row.pulse, null, null, null, row.id);
      return row;
    },
  };
}
