import type { RunReading } from "../../../analysis/run.ts";
import { CallError } from "../failure.ts";
import type { Companion } from "../reading/index.ts";
import { rememberedNote, withRemembered, type Remembered } from "../remembered.ts";
import type { CaptureSource } from "../sources.ts";
import type { JudgedFile, Tasks } from "../threads/tasks.ts";

/** Whoever reads: a thread of its own, or this very process. */
export interface Reader {
  ask<Name extends "read" | "judge">(
    name: Name,
    argument: Tasks[Name]["argument"],
    onProgress?: (fraction: number) => void,
  ): Promise<Tasks[Name]["answer"]>;
}

export type JudgedSource = JudgedFile & CaptureSource;

/** What is done with a run each time it has been judged. */
export interface RunKeeper {
  keep(files: JudgedSource[], reading: RunReading): void;
  /** What was answered before for files of this layout. */
  remembered(layout: string): Remembered[];
  /** A file has been read: the book may want a copy of it and of what was read along with it. */
  copy(file: CaptureSource, sha256: string, companions: Companion[]): Promise<void>;
  /** A file that could not be read. */
  problem(file: CaptureSource, error: unknown): void;
}

export interface RunProgress {
  readonly cancelled: boolean;
  /** Files done, with the fraction of the one in hand. */
  progress(done: number): void;
}

/** A long job is judged and kept this often, so that its run grows while it is watched. */
const keptApart_ms = 1500;

/**
 * Reads `fresh` and judges them together with the files that the run has already (none, when the whole
 * run is computed again). What was kept when the job is cancelled stays.
 */
export async function readRun(
  reader: Reader,
  keeper: RunKeeper,
  progress: RunProgress,
  known: CaptureSource[],
  fresh: CaptureSource[],
): Promise<void> {
  const members = known.filter(({ path }) => !fresh.some((file) => file.path === path));
  let keptLast = Date.now();
  let unkept = known.length;
  for (const [i, file] of fresh.entries()) {
    if (progress.cancelled) break;
    const read = await readOne(reader, keeper, progress, file, (fraction) => progress.progress(i + fraction));
    progress.progress(i + 1);
    if (!read) continue;
    members.push(read);
    unkept++;
    if (Date.now() - keptLast < keptApart_ms) continue;
    await judge(reader, keeper, progress, members);
    [keptLast, unkept] = [Date.now(), 0];
  }
  if (unkept > 0 && !progress.cancelled) await judge(reader, keeper, progress, members);
}

/** The file as it was read, with what earlier answers added to its setup; null where it could not be read. */
async function readOne(
  reader: Reader,
  keeper: RunKeeper,
  progress: RunProgress,
  file: CaptureSource,
  onProgress?: (fraction: number) => void,
): Promise<CaptureSource | null> {
  try {
    // An answer may bring up the next question: every key is answered once at most.
    for (let now = file; ;) {
      const { path, setup, copy } = now;
      const { layout, asked, sha256, companions } = await reader.ask(
        "read",
        { path, setup, copy },
        onProgress,
      );
      const answered = withRemembered(now, asked, keeper.remembered(layout));
      if (!answered || progress.cancelled) {
        await keeper.copy(now, sha256, companions);
        return now;
      }
      now = answered;
    }
  } catch (error) {
    if (!progress.cancelled) keeper.problem(file, error);
    return null;
  }
}

/** Judges the members; evidence that the reader lost (it died, or starts anew) is read again first. */
async function judge(reader: Reader, keeper: RunKeeper, progress: RunProgress, members: CaptureSource[]) {
  for (let deaths = 0; members.length > 0 && !progress.cancelled;) {
    try {
      const files = members.map(({ path, setup }) => ({ path, setup }));
      const answer = await reader.ask("judge", { files, setup: members[0].setup });
      if (!("missing" in answer)) {
        keeper.keep(
          answer.files.map((file, i) => withNote({ ...members[i], ...file })),
          answer.run,
        );
        return;
      }
      await readMissing(reader, keeper, progress, members, answer.missing);
    } catch (error) {
      if (!(error instanceof CallError && error.code === "worker-died") || ++deaths > 2) throw error;
    }
  }
}

function withNote(file: JudgedSource): JudgedSource {
  const { remembered, readings } = file;
  if (!remembered) return file;
  const note = rememberedNote(remembered);
  return { ...file, readings: readings.map((reading) => ({ ...reading, notes: [note, ...reading.notes] })) };
}

async function readMissing(
  reader: Reader,
  keeper: RunKeeper,
  progress: RunProgress,
  members: CaptureSource[],
  missing: string[],
) {
  for (const path of missing) {
    if (progress.cancelled) return;
    const at = members.findIndex((member) => member.path === path);
    const read = await readOne(reader, keeper, progress, members[at]);
    members.splice(at, 1, ...(read ? [read] : []));
  }
}
