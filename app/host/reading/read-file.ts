import { basename } from "node:path";
import type { Capture } from "../../../analysis/capture.ts";
import { ReadingError } from "../../../analysis/errors.ts";
import { ingest, type CancelSignal } from "../../../analysis/ingest/index.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import { openFile } from "./file-source.ts";
import { openParser } from "./parse-pool.ts";

interface ReadOptions {
  /** Share of the file read, 0 … 1. */
  onProgress?: (share: number) => void;
  signal?: CancelSignal;
}

interface ReadFile {
  /** Lower-case hex over the file's bytes as they lie on the disk. */
  sha256: string;
  bytes: number;
  /** The same for files of the same layout: answers given for one hold for the others. */
  layout: string;
  captures: Capture[];
}

/** Reads one capture file, `.gz` too. Throws ReadingError. */
export async function readFile(
  path: string,
  setup: Setup,
  { onProgress, signal }: ReadOptions = {},
): Promise<ReadFile> {
  const file = await openFile(path);
  const parser = openParser(file.bytes);
  try {
    const progress = () => onProgress?.(file.share());
    const { captures, layout } = await ingest(file.source, setup, { progress, signal, parser });
    return { sha256: await file.finish(), bytes: file.bytes, layout, captures };
  } catch (error) {
    if (error instanceof ReadingError || !(error instanceof RangeError)) throw error;
    throw new ReadingError(
      "too-large",
      `${basename(path)} does not fit into memory`,
      "Cut the record into shorter files",
    );
  } finally {
    parser?.close();
    await file.close();
  }
}

/** What a folder's listing takes for captures: by ending, sidecars and setups left out by name. */
export const isCaptureFile = (name: string) =>
  /\.(csv|txt|tsv|dat)(\.gz)?$/i.test(name) && !name.startsWith(".");
