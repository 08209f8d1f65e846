import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import { version } from "../../../package.json";
import type { CaptureReading, PulseReading } from "../../../analysis/reading-format.ts";
import type { RunReading } from "../../../analysis/run.ts";
import type { JudgedSource } from "../jobs/read-run.ts";
import type { Sketch } from "../view/sketch.ts";
import { pack, uOf, unpack, valueOf } from "./rows.ts";
import type { Trail } from "./trail.ts";

/** What a run holds after a judging: all its files, in order. */
export interface JudgedRun {
  files: JudgedSource[];
  reading: RunReading;
}

/** Writes a judged run; the caller holds the transaction. */
export function keeper(db: DatabaseSyncInstance, trail: Trail) {
  const find = db.prepare("SELECT id FROM captures WHERE run = ? AND sha256 = ? AND record = ?");
  const add = db.prepare(
    `INSERT INTO captures (run, position, path, sha256, bytes, record, records, setup, pulses, added, layout)
     VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?) RETURNING id`,
  );
  const place = db.prepare(
    "UPDATE captures SET position = ?, path = ?, setup = ?, pulses = ?, reading = ?, layout = ? WHERE id = ?",
  );
  const latest = db.prepare(
    "SELECT id, version, setup, json FROM readings WHERE capture = ? ORDER BY id DESC LIMIT 1",
  );
  const addReading = db.prepare(
    "INSERT INTO readings (capture, version, setup, at, json) VALUES (?, ?, ?, ?, ?) RETURNING id",
  );
  const completeReading = db.prepare("UPDATE readings SET at = ?, json = ? WHERE id = ?");
  const forget = db.prepare("DELETE FROM pulses WHERE capture = ?");
  const addPulse = db.prepare(
    `INSERT INTO pulses (capture, pulse, run, number, verdict, ruled, probability, peak_V, margin, q, q_u,
       frequency_Hz, frequency_u, onset_s, quality, sketch, sketchOnset)
     VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
  );
  const accompany = db.prepare("INSERT OR REPLACE INTO companions VALUES (?, ?, ?)");
  const solved = db.prepare("DELETE FROM problems WHERE run = ? AND path = ?");
  const twice = db.prepare("INSERT OR REPLACE INTO problems VALUES (?, ?, 'same-capture', ?, ?)");
  const supersede = db.prepare("UPDATE captures SET position = -1 WHERE run = ? AND position >= 0");
  const forgetSuperseded = db.prepare(
    "DELETE FROM pulses WHERE capture IN (SELECT id FROM captures WHERE run = ? AND position < 0)",
  );

  /**
   * One reading a program version and setup: while a run grows its verdicts settle, and the reading is
   * completed; a newer program or another setup adds a reading beside it.
   */
  function keepReading(capture: number, setup: string, reading: CaptureReading): number {
    const before = latest.get(capture) as
      | { id: number; version: string; setup: string; json: Uint8Array }
      | undefined;
    if (before && before.version === version && before.setup === setup) {
      if (JSON.stringify(unpack(before.json)) !== JSON.stringify(reading))
        completeReading.run(isoNow(), pack(reading), before.id);
      return before.id;
    }
    return (addReading.get(capture, version, setup, isoNow(), pack(reading)) as { id: number }).id;
  }

  function keepPulse(
    run: number,
    capture: number,
    number: number,
    pulse: PulseReading,
    sketch: Sketch | null,
  ) {
    const { spark, ring } = pulse;
    const onset = spark?.onset_s ?? null;
    const along = sketch && onset !== null ? (onset - sketch.from_s) / (sketch.to_s - sketch.from_s) : null;
    const mode = ring?.modes[0];
    addPulse.run(
      capture,
      pulse.index,
      run,
      number,
      spark?.verdict ?? null,
      trail.ruling(capture, pulse.index)?.verdict ?? null,
      spark?.probability ?? null,
      pulse.peak_V,
      pulse.margin,
      valueOf(mode?.q),
      uOf(mode?.q),
      valueOf(mode?.frequency_Hz),
      uOf(mode?.frequency_Hz),
      onset,
      ring?.quality ?? null,
      JSON.stringify(sketch?.heights ?? []),
      along,
    );
  }

  return function keep(run: number, { files }: JudgedRun): void {
    // What this judging does not hold (a file written anew) keeps its readings but leaves the lists.
    supersede.run(run);
    let position = 0;
    let number = 0;
    const kept = new Map<string, string>();
    for (const file of files) {
      const twin = kept.get(file.sha256);
      if (twin !== undefined) {
        twice.run(run, file.path, `is the same capture as ${twin}, byte for byte: it is kept once`, isoNow());
        continue;
      }
      kept.set(file.sha256, file.path);
      for (const { name, sha256 } of file.companions) accompany.run(file.sha256, name, sha256);
      const setup = JSON.stringify(file.setup);
      for (const [r, reading] of file.readings.entries()) {
        const { index, count } = reading.record;
        const pulses = reading.pulses.length;
        const known = find.get(run, file.sha256, index) as { id: number } | undefined;
        const added = () =>
          add.get(
            run,
            position,
            file.path,
            file.sha256,
            file.bytes,
            index,
            count,
            setup,
            pulses,
            isoNow(),
            file.layout,
          );
        const { id } = known ?? (added() as { id: number });
        place.run(position++, file.path, setup, pulses, keepReading(id, setup, reading), file.layout, id);
        forget.run(id);
        for (const [p, pulse] of reading.pulses.entries())
          keepPulse(run, id, ++number, pulse, file.sketches[r]?.[p] ?? null);
      }
      solved.run(run, file.path);
    }
    forgetSuperseded.run(run);
  };
}

const isoNow = () => new Date().toISOString();
