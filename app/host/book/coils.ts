import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import { departures, drifts, type CoilRun } from "../../../analysis/coil/history.ts";
import type { RunCounts } from "../../../analysis/reading-format.ts";
import type { CoilHistoryRow, CoilRow } from "../../bridge.ts";
import { figure, parse } from "./rows.ts";

type Row = Record<string, never>;

/** The book by coil: what is known of each, and how it changed from run to run. */
export function coilQueries(db: DatabaseSyncInstance) {
  const coils = db.prepare(
    `SELECT coil, count(*) AS runs, min(coalesce(taken, added)) AS first, max(coalesce(taken, added)) AS last,
       sum(json_extract(counts, '$.pulses')) AS pulses
     FROM runs WHERE coil IS NOT NULL GROUP BY coil ORDER BY last DESC`,
  );
  const latest = db.prepare(
    `SELECT inductance_H, inductance_u FROM runs WHERE coil = ? AND inductance_H IS NOT NULL
     ORDER BY coalesce(taken, added) DESC, id DESC LIMIT 1`,
  );
  const history = db.prepare("SELECT * FROM runs WHERE coil = ? ORDER BY coalesce(taken, added), id");

  return {
    coils: (): CoilRow[] =>
      (coils.all() as Row[]).map(({ coil, runs, pulses, first, last }) => {
        const row = latest.get(coil) as Row | undefined;
        const inductance_H = row ? figure(row.inductance_H, row.inductance_u) : null;
        return { coil, runs, pulses, first, last, inductance_H };
      }),

    /** In the order of time, with what departs and what drifts in words. */
    coilHistory(coil: string): { rows: CoilHistoryRow[]; drifts: string[] } {
      const rows = history.all(coil) as Row[];
      const runs = rows.map(toCoilRun);
      const flags = departures(runs);
      return { rows: rows.map((row, i) => ({ ...toHistoryRow(row), flag: flags[i] })), drifts: drifts(runs) };
    },
  };
}

const day_ms = 86_400_000;

const toCoilRun = (row: Row): CoilRun => ({
  day: Date.parse(row.taken ?? row.added) / day_ms,
  capacitance_F: figure(row.capacitance_F, row.capacitance_u),
  inductance_H: figure(row.inductance_H, row.inductance_u),
  q: figure(row.q, row.q_u),
  resistance20_ohm: figure(row.resistance20_ohm, row.resistance20_u),
});

const toHistoryRow = (row: Row): Omit<CoilHistoryRow, "flag"> => ({
  run: row.id,
  name: row.name,
  taken: row.taken,
  inductance_H: figure(row.inductance_H, row.inductance_u),
  capacitance_F: figure(row.capacitance_F, row.capacitance_u),
  resistance_ohm: figure(row.resistance_ohm, row.resistance_u),
  q: figure(row.q, row.q_u),
  resistance20_ohm: figure(row.resistance20_ohm, row.resistance20_u),
  misfireRate: parse<RunCounts>(row.counts).misfireRate,
  peak_V: row.peak_V,
});
