import type { DatabaseSyncInstance } from "@photostructure/sqlite";
import type { CaptureReading } from "../../../analysis/reading-format.ts";
import type { RunReading } from "../../../analysis/run.ts";
import { countPulses } from "../../../analysis/spark/counts.ts";
import type { RunTrends } from "../../../analysis/spark/run-trends.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { Argument, CaptureDetail, CaptureRow, Page, PulseRow, RunDetail, RunRow } from "../../bridge.ts";
import { CallError } from "../failure.ts";
import { attentionOf, missingStatements, trendAttention, worstFirst } from "./attention.ts";
import { figure, parse, unpack } from "./rows.ts";
import { companionsOf } from "./originals.ts";
import type { Trail } from "./trail.ts";

const firstPage = 100;
type Row = Record<string, never>;

/** Pages are walked by key, never by offset: the cursor is the last row's key. */
export function queries(db: DatabaseSyncInstance, trail: Trail) {
  const oneRun = db.prepare("SELECT * FROM runs WHERE id = ?");
  const onePage = db.prepare("SELECT * FROM pulses WHERE run = ? AND number > ? ORDER BY number LIMIT ?");
  const ofRun = db.prepare(
    `SELECT captures.*, readings.json FROM captures LEFT JOIN readings ON readings.id = captures.reading
     WHERE captures.run = ? AND position >= 0 ORDER BY position`,
  );
  const oneCapture = db.prepare(
    `SELECT captures.*, readings.json FROM captures LEFT JOIN readings ON readings.id = captures.reading
     WHERE captures.id = ?`,
  );
  const companions = companionsOf(db);
  const readings = db.prepare("SELECT * FROM readings WHERE capture = ? ORDER BY id");
  const problems = db.prepare("SELECT path, text FROM problems WHERE run = ? ORDER BY path");

  function runRow(run: number): Row {
    const row = oneRun.get(run) as Row | undefined;
    if (!row) throw new CallError("no-such-run", `the book has no run ${run}`);
    return row;
  }

  function captureDetail(row: Row): CaptureDetail {
    const setup = parse<Setup>(row.setup);
    const read = unpack<CaptureReading>(row.json);
    const pulses = read.pulses.map((pulse) => ({ ...pulse, ruled: trail.ruling(row.id, pulse.index) }));
    const reading = { ...read, pulses, run: countPulses(pulses, setup) };
    const { id: capture, run, path: file, sha256 } = row;
    return { capture, run, file, sha256, companions: companions(sha256), setup, reading };
  }

  return {
    captures: (run: number) => (ofRun.all(run) as Row[]).map(captureDetail),

    capture(capture: number): CaptureDetail {
      const row = oneCapture.get(capture) as Row | undefined;
      if (!row) throw new CallError("no-such-capture", `the book has no capture ${capture}`);
      return captureDetail(row);
    },

    /** All readings of a capture, the oldest first: which program concluded what, with which setup. */
    readingsOf(capture: number): { version: string; at: string; setup: Setup; reading: CaptureReading }[] {
      const rows = readings.all(capture) as Row[];
      return rows.map(({ version, at, setup, json }) => ({
        version,
        at,
        setup: parse<Setup>(setup),
        reading: unpack<CaptureReading>(json),
      }));
    },

    runs(query: Argument<"runs">): Page<RunRow> {
      const limit = query.limit ?? firstPage;
      const { where, values } = runFilter(query);
      const rows = db
        .prepare(`SELECT * FROM runs WHERE ${where} ORDER BY id DESC LIMIT ?`)
        .all(...values, limit) as Row[];
      return { rows: rows.map(toRunRow), cursor: rows.length === limit ? String(rows.at(-1)!.id) : null };
    },

    run(run: number): RunDetail {
      const row = runRow(run);
      const setup = parse<Setup>(row.setup);
      const kept = (ofRun.all(run) as Row[]).map(captureDetail);
      const captureRows: CaptureRow[] = kept.map(({ capture, file, reading }) => {
        const { index, count } = reading.record;
        return { capture, file, record: { index, count }, pulses: reading.pulses.length, error: null };
      });
      const failed = problems.all(run) as unknown as { path: string; text: string }[];
      const reading = row.reading === null ? null : parse<RunReading>(row.reading);
      return {
        ...toRunRow(row),
        setup,
        origins: parse(row.origins),
        captureRows: [...captureRows, ...failed.map(failedRow)],
        combined: reading?.combined ?? nothingCombined,
        notes: reading?.notes ?? [],
        attention: [
          ...failed.map(({ path, text }) => ({
            kind: "error" as const,
            text: `${path}: ${text}`,
            ...nowhere,
          })),
          ...worstFirst(kept.flatMap(attentionOf)),
          ...trendAttention(reading?.notes ?? []),
          ...missingStatements(setup),
        ],
        canUndo: trail.canUndo(run),
      };
    },

    /** As judged last; null where an older version judged the run. */
    trends(run: number): RunTrends | null {
      const { reading } = runRow(run);
      return reading === null ? null : (parse<RunReading>(reading).trends ?? null);
    },

    pulses(
      run: number,
      { cursor, limit = firstPage }: { cursor?: string | null; limit?: number },
    ): Page<PulseRow> {
      runRow(run);
      const rows = onePage.all(run, Number(cursor ?? 0), limit) as Row[];
      return {
        rows: rows.map(toPulseRow),
        cursor: rows.length === limit ? String(rows.at(-1)!.number) : null,
      };
    },
  };
}

const nowhere = { capture: null, pulse: null };
const nothingCombined = { inductance_H: null, capacitance_F: null, resistance_ohm: null, q: null };

/** Capture ids start at 1; a file that could not be read has none, and its error instead. */
const failedRow = ({ path, text }: { path: string; text: string }): CaptureRow => ({
  capture: 0,
  file: path,
  record: { index: 0, count: 0 },
  pulses: 0,
  error: text,
});

const toRunRow = (row: Row): RunRow => ({
  run: row.id,
  name: row.name,
  coil: row.coil,
  taken: row.taken,
  captures: row.captures,
  counts: parse(row.counts),
});

const toPulseRow = (row: Row): PulseRow => ({
  capture: row.capture,
  pulse: row.pulse,
  number: row.number,
  verdict: row.verdict,
  ruled: row.ruled,
  probability: row.probability,
  peak_V: row.peak_V,
  margin: row.margin,
  q: figure(row.q, row.q_u),
  frequency_Hz: figure(row.frequency_Hz, row.frequency_u),
  onset_s: row.onset_s,
  quality: row.quality,
  sketch: parse(row.sketch),
  sketchOnset: row.sketchOnset,
});

/** The search goes through names, coils, files and remarks; each further word narrows it. */
function runFilter({ search, coil, from, to, verdict, cursor }: Argument<"runs">) {
  const parts: string[] = ["true"];
  const values: (string | number)[] = [];
  const add = (part: string, ...more: (string | number)[]) => {
    parts.push(part);
    values.push(...more);
  };
  if (cursor) add("id < ?", Number(cursor));
  if (coil) add("coil = ?", coil);
  if (from) add("coalesce(taken, added) >= ?", from);
  if (to) add("substr(coalesce(taken, added), 1, 10) <= ?", to);
  if (verdict)
    add("EXISTS (SELECT 1 FROM pulses WHERE run = runs.id AND coalesce(ruled, pulses.verdict) = ?)", verdict);
  for (const word of (search ?? "").split(/\s+/).filter(Boolean)) {
    const like = `%${word.replace(/[\\%_]/g, "\\$&")}%`;
    add(
      `(name LIKE ? ESCAPE '\\' OR coil LIKE ? ESCAPE '\\'
        OR EXISTS (SELECT 1 FROM captures WHERE run = runs.id AND path LIKE ? ESCAPE '\\')
        OR EXISTS (SELECT 1 FROM trail WHERE run = runs.id AND remark LIKE ? ESCAPE '\\'))`,
      like,
      like,
      like,
      like,
    );
  }
  return { where: parts.join(" AND "), values };
}
