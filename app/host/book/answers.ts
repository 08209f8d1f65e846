/** What the user answered about files of one layout, for the next file built alike. */
import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import type { Setup } from "../../../analysis/setup/schema.ts";
import { answerKeys, type Remembered } from "../remembered.ts";
import { parse } from "./rows.ts";
import { standing } from "./trail.ts";

export function answersOf(db: DatabaseSyncInstance) {
  const add = db.prepare(
    `INSERT INTO answers (trail, layout, answers)
     SELECT DISTINCT ?, layout, ? FROM captures WHERE run = ? AND position >= 0 AND layout IS NOT NULL`,
  );
  const given = db.prepare(
    `SELECT answers.answers, trail.at, runs.name FROM answers
     JOIN trail ON trail.id = answers.trail JOIN runs ON runs.id = trail.run
     WHERE layout = ? AND ${standing} ORDER BY trail.id DESC`,
  );
  return {
    /** Keeps what a change of the run's setup (a row of the trail) answers; other statements are the run's own. */
    keep(run: number, trail: number, change: Record<string, unknown>): void {
      const answered = Object.entries(change).filter(([key]) =>
        (answerKeys as readonly string[]).includes(key),
      );
      if (answered.length > 0) add.run(trail, JSON.stringify(Object.fromEntries(answered)), run);
    },

    /** Key by key the last answer that stands; a key changed to null is answered no more. */
    remembered(layout: string): Remembered[] {
      const rows = given.all(layout) as { answers: string; at: string; name: string }[];
      return answerKeys.flatMap((key) => {
        const row = rows.find(({ answers }) => key in parse<Setup>(answers));
        const value = row && parse<Setup>(row.answers)[key];
        return row && value !== null && value !== undefined
          ? [{ key, value, at: row.at, run: row.name }]
          : [];
      });
    },
  };
}
