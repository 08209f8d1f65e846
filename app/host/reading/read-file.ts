import { basename, dirname, join } from "node:path";
import { setImmediate } from "node:timers/promises";
import type { Capture, Note } from "../../../analysis/capture.ts";
import { ReadingError } from "../../../analysis/errors.ts";
import { ingest, type CancelSignal } from "../../../analysis/ingest/index.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import { openFile } from "./file-source.ts";
import { difference, joinCaptures, setupOfFile } from "./join-channels.ts";
import { channelSiblings, joinedFiles, readSidecar } from "./neighbours.ts";
import { openParser } from "./parse-pool.ts";

interface ReadOptions {
  /** Share of the file read, 0 … 1. */
  onProgress?: (share: number) => void;
  signal?: CancelSignal;
}

/** A file read along with a capture file: its settings, or a further channel of its shot. */
export interface Companion {
  /** In the capture file's own folder. */
  name: string;
  sha256: string;
}

interface ReadFile {
  /** Lower-case hex over the file's bytes as they lie on the disk. */
  sha256: string;
  bytes: number;
  /** The same for files of the same layout: answers given for one hold for the others. */
  layout: string;
  captures: Capture[];
  companions: Companion[];
}

/**
 * Reads one capture file, `.gz` too, with its settings file where the interval stands there, and with the
 * further files of its shot where the setup names them. Throws ReadingError.
 */
export async function readFile(path: string, setup: Setup, options: ReadOptions = {}): Promise<ReadFile> {
  const files = joinedFiles(path, setup);
  if (files.length === 0) {
    const read = await readOne(path, setup, options);
    return { ...read, captures: await withOffer(path, setup, read) };
  }
  const parts = [];
  for (const file of files)
    parts.push({ path: file, ...(await readOne(file, setupOfFile(setup, file), options)) });
  const companions = parts.flatMap((part, i) => [
    ...(i > 0 ? [{ name: basename(part.path), sha256: part.sha256 }] : []),
    ...part.companions,
  ]);
  return { ...parts[0], captures: joinCaptures(parts), companions };
}

async function readOne(path: string, setup: Setup, options: ReadOptions): Promise<ReadFile> {
  const read = await readAlone(path, setup, options, null);
  if (!read.captures.some(({ notes }) => notes.some(({ code }) => code === "interval-unknown"))) return read;
  const sidecar = await readSidecar(path);
  if (sidecar === null) return read;
  const { name, text, sha256 } = sidecar;
  return { ...(await readAlone(path, setup, options, text)), companions: [{ name, sha256 }] };
}

const beat_ms = 100;

async function readAlone(
  path: string,
  setup: Setup,
  { onProgress, signal }: ReadOptions,
  sidecar: string | null,
): Promise<ReadFile> {
  const file = await openFile(path);
  const parser = openParser(file.bytes);
  let beat: NodeJS.Timeout | undefined;
  try {
    const progress = () => onProgress?.(file.share());
    // While threads start and pieces are awaited nothing else tells that it goes on.
    beat = setInterval(progress, beat_ms);
    progress();
    const { captures, layout } = await ingest(file.source, setup, {
      progress,
      rest: setImmediate,
      signal,
      parser,
      sidecar,
    });
    return { sha256: await file.finish(), bytes: file.bytes, layout, captures, companions: [] };
  } catch (error) {
    if (error instanceof ReadingError || !(error instanceof RangeError)) throw error;
    throw new ReadingError(
      "too-large",
      `${basename(path)} does not fit into memory`,
      "Cut the record into shorter files",
    );
  } finally {
    clearInterval(beat);
    await parser?.close();
    await file.close();
  }
}

/** Above this a neighbour is not read just to offer it. */
const offered_bytes = 20e6;

/** Files that differ only in a channel mark and share a time base are offered as one capture, never joined unasked. */
async function withOffer(path: string, setup: Setup, { captures, bytes }: ReadFile): Promise<Capture[]> {
  if (captures.length !== 1 || bytes > offered_bytes) return captures;
  const matching: string[] = [];
  for (const name of await channelSiblings(path)) {
    const sibling = await readAlone(join(dirname(path), name), setup, {}, null).catch(() => null);
    if (sibling && difference(captures[0], sibling.captures[0]) === null) matching.push(name);
  }
  if (matching.length === 0) return captures;
  const note: Note = {
    code: "channel-files",
    text: `${matching.join(", ")} in the same folder may be further channels of this shot: same time base, names that differ in a channel mark.`,
    question: "Are these files channels of one capture? Name them under channels[].file to join them.",
    choices: ["one capture", "captures of their own"],
    answers: "channels",
  };
  return [{ ...captures[0], notes: [...captures[0].notes, note] }];
}
