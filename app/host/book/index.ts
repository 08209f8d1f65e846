import { backup, type DatabaseSyncInstance } from "@photostructure/sqlite";
import type { Ruling, Verdict } from "../../../analysis/reading-format.ts";
import { countsOf } from "../../../analysis/spark/counts.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import type { SetupOrigin } from "../../bridge.ts";
import type { Failure } from "../failure.ts";
import type { RunOfSources } from "../sources.ts";
import { answersOf } from "./answers.ts";
import { coilQueries } from "./coils.ts";
import { historyOf } from "./history.ts";
import { keeper, type JudgedRun } from "./keep.ts";
import { openDatabase } from "./open.ts";
import { queries } from "./queries.ts";
import { companionsOf, originalsOf } from "./originals.ts";
import { parse, uOf, valueOf } from "./rows.ts";
import { trailOf } from "./trail.ts";
import { transaction } from "./transaction.ts";

/** A file of a run, as it was read last. */
interface KeptFile {
  path: string;
  sha256: string;
  setup: Setup;
  origins: Record<string, SetupOrigin>;
}

export type Book = ReturnType<typeof bookOn>;

/** Opens the bench book at the path, or makes it. Throws a CallError that says what to do. */
export async function openBook(path: string): Promise<Book> {
  const { db, readOnly, note } = openDatabase(path);
  return bookOn(db, path, readOnly, note);
}

function once<T>(make: () => T): () => T {
  let made: T | undefined;
  return () => (made ??= make());
}

function bookOn(db: DatabaseSyncInstance, path: string, readOnly: boolean, note: string | null) {
  const trail = trailOf(db);
  const ask = queries(db, trail);
  // Made when first needed: a book of an older format that is open for reading only lacks their columns.
  const keep = once(() => keeper(db, trail));
  const answers = once(() => answersOf(db));
  const originals = once(() => originalsOf(db));

  /** The run's own columns after a judging or a ruling. */
  function recount(run: number): void {
    const { setup } = db.prepare("SELECT setup FROM runs WHERE id = ?").get(run) as { setup: string };
    const rows = db
      .prepare(
        "SELECT coalesce(ruled, verdict, 'unclear') AS verdict, count(*) AS n FROM pulses WHERE run = ? GROUP BY 1",
      )
      .all(run) as { verdict: Verdict; n: number }[];
    const count = (verdict: Verdict) => rows.find((row) => row.verdict === verdict)?.n ?? 0;
    const counted = { sparks: count("spark"), quiet: count("no-spark"), unclear: count("unclear") };
    const counts = countsOf(counted, parse<Setup>(setup));
    db.prepare("UPDATE runs SET counts = ? WHERE id = ?").run(JSON.stringify(counts), run);
  }

  function keepRun(run: number, judged: JudgedRun): void {
    const [first] = judged.files;
    const setup: Setup = first?.setup ?? {};
    const { combined } = judged.reading;
    const r20 = judged.files.flatMap(({ readings }) => readings).find((reading) => reading.ramp)?.ramp;
    const peaks = judged.files.flatMap(({ readings }) => readings.flatMap(({ pulses }) => pulses));
    const peak = peaks.reduce<number | null>(
      (most, { peak_V }) => (peak_V === null ? most : Math.max(most ?? 0, peak_V)),
      null,
    );
    transaction(db, () => {
      keep()(run, judged);
      db.prepare(
        `UPDATE runs SET setup = ?, origins = ?, coil = ?, taken = ?, reading = ?,
           captures = (SELECT count(*) FROM captures WHERE run = runs.id AND position >= 0),
           inductance_H = ?, inductance_u = ?, capacitance_F = ?, capacitance_u = ?, resistance_ohm = ?,
           resistance_u = ?, q = ?, q_u = ?, resistance20_ohm = ?, resistance20_u = ?, peak_V = ?
         WHERE id = ?`,
      ).run(
        JSON.stringify(setup),
        JSON.stringify(first?.origins ?? {}),
        setup.coil ?? null,
        setup.taken ?? null,
        JSON.stringify(judged.reading),
        valueOf(combined.inductance_H),
        uOf(combined.inductance_H),
        valueOf(combined.capacitance_F),
        uOf(combined.capacitance_F),
        valueOf(combined.resistance_ohm),
        uOf(combined.resistance_ohm),
        valueOf(combined.q),
        uOf(combined.q),
        valueOf(r20?.resistance20_ohm),
        uOf(r20?.resistance20_ohm),
        peak,
        run,
      );
      recount(run);
    });
  }

  return {
    path,
    readOnly,
    note,
    ...ask,
    ...coilQueries(db),
    history: historyOf(db),
    runCount: () => (db.prepare("SELECT count(*) AS n FROM runs").get() as { n: number }).n,

    /** The run of this key, made when there is none. */
    ensureRun({ key, name, folder }: Pick<RunOfSources, "key" | "name" | "folder">): number {
      const known = db.prepare("SELECT id FROM runs WHERE key = ?").get(key) as { id: number } | undefined;
      if (known) return known.id;
      const empty = JSON.stringify(countsOf({ sparks: 0, quiet: 0, unclear: 0 }, {}));
      return transaction(db, () => {
        const row = db
          .prepare(
            `INSERT INTO runs (key, name, folder, added, counts) VALUES (?, ?, ?, ?, ?)
             ON CONFLICT (key) DO UPDATE SET name = name RETURNING id`,
          )
          .get(key, name, folder, new Date().toISOString(), empty) as { id: number };
        return row.id;
      });
    },

    keepRun,

    keepProblem(run: number, file: string, { code, text }: Failure): void {
      transaction(db, () =>
        db
          .prepare("INSERT OR REPLACE INTO problems VALUES (?, ?, ?, ?, ?)")
          .run(run, file, code, text, new Date().toISOString()),
      );
    },

    /** Files of the run, each once, in its order, with what their own setup files said when they were read. */
    runFiles(run: number): KeptFile[] {
      const { origins } = db.prepare("SELECT origins FROM runs WHERE id = ?").get(run) as { origins: string };
      const ofFiles = Object.entries(parse<Record<string, SetupOrigin>>(origins)).filter(
        // What was answered before is asked and answered anew, so that it can be taken back.
        ([, origin]) => origin === "file setup" || origin === "folder setup",
      );
      const rows = db
        .prepare(
          `SELECT path, sha256, setup FROM captures WHERE run = ? AND position >= 0
           GROUP BY path ORDER BY min(position)`,
        )
        .all(run) as { path: string; sha256: string; setup: string }[];
      return rows.map(({ path, sha256, setup }) => {
        const kept = parse<Record<string, unknown>>(setup);
        const own = Object.fromEntries(ofFiles.map(([key]) => [key, kept[key]]));
        return { path, sha256, setup: own, origins: Object.fromEntries(ofFiles) };
      });
    },
    /** Copies of the files themselves, where the user wants them. */
    originals,
    companions: companionsOf(db),

    /** Whether the file was kept as it is: same size, and not changed since. */
    knows(file: string, bytes: number, changed_ms: number): boolean {
      const row = db
        .prepare("SELECT added FROM captures WHERE path = ? AND bytes = ? ORDER BY id DESC LIMIT 1")
        .get(file, bytes) as { added: string } | undefined;
      return row !== undefined && Date.parse(row.added) >= changed_ms;
    },

    captureFile(capture: number) {
      const { run, file, sha256, setup, reading } = ask.capture(capture);
      return { run, path: file, sha256, record: reading.record.index, setup, reading };
    },

    stated: trail.stated,
    /** `change`: the part that is new; answers to the reader's questions in it serve files of the same layout. */
    stateSetup: (run: number, stated: Setup, change: Record<string, unknown> = {}) =>
      transaction(db, () => answers().keep(run, trail.addSetup(run, stated), change)),
    /** Answers that stand for files of this layout. */
    remembered: (layout: string) => answers().remembered(layout),

    /** The user's verdict beside the program's; a null verdict takes no side and leaves only the remark. */
    rule(capture: number, pulse: number, verdict: Verdict | null, remark: string): Ruling | null {
      const { run } = ask.capture(capture);
      return transaction(db, () => {
        const ruling = trail.addRuling(run, capture, pulse, verdict, remark);
        setRuled(capture, pulse);
        recount(run);
        return ruling;
      });
    },

    undo(run: number): { text: string; rejudge: boolean } {
      return transaction(db, () => {
        const { kind, capture, pulse } = trail.undo(run);
        if (kind === "setup") return { text: "the last change of the setup is taken back", rejudge: true };
        setRuled(capture!, pulse!);
        recount(run);
        return { text: `your last verdict, on pulse ${pulse! + 1}, is taken back`, rejudge: false };
      });
    },

    preferences(): Record<string, string> {
      const rows = db.prepare("SELECT key, value FROM preferences").all() as { key: string; value: string }[];
      return Object.fromEntries(rows.map(({ key, value }) => [key, value]));
    },
    setPreference(key: string, value: string): void {
      transaction(db, () => db.prepare("INSERT OR REPLACE INTO preferences VALUES (?, ?)").run(key, value));
    },

    /** A whole copy while the book stays in use. */
    backup: (destination: string) => backup(db, destination),
    /** Leaves one whole file behind: who copies a closed book needs no log beside it. */
    close(): void {
      if (!readOnly) db.exec("PRAGMA wal_checkpoint(TRUNCATE)");
      db.close();
    },
  };

  function setRuled(capture: number, pulse: number): void {
    db.prepare("UPDATE pulses SET ruled = ? WHERE capture = ? AND pulse = ?").run(
      trail.ruling(capture, pulse)?.verdict ?? null,
      capture,
      pulse,
    );
  }
}
