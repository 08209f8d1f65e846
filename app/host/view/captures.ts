import { stat } from "node:fs/promises";
import type { Capture } from "../../../analysis/capture.ts";
import { readFile } from "../reading/index.ts";
import type { FileToRead } from "../threads/tasks.ts";
import { createCache } from "./cache.ts";
import { buildPyramid, type Pyramid } from "./pyramid.ts";

/** A file's captures held ready for windows onto them. */
export interface HeldCaptures {
  captures: Capture[];
  pyramid(record: number, channel: number): Pyramid;
}

interface Held extends HeldCaptures {
  bytes: number;
}

const mostBytes = 600e6;

/**
 * The raw samples of the files looked at last, read again from the file when they are not held.
 * A file that changed since, or another setup, is another entry.
 */
export function createCaptureHolder(): (file: FileToRead) => Promise<HeldCaptures> {
  const cache = createCache<Held>(mostBytes, (held) => held.bytes);
  const reading = new Map<string, Promise<Held>>();

  return async (file) => {
    const { mtimeMs, size } = await stat(file.path);
    const key = JSON.stringify([file.path, mtimeMs, size, file.setup]);
    const held = cache.get(key);
    if (held) return held;
    // Several windows onto one file ask at the same time: they share one reading of it.
    const pending = reading.get(key) ?? hold(file);
    reading.set(key, pending);
    try {
      const fresh = await pending;
      cache.set(key, fresh);
      return fresh;
    } finally {
      reading.delete(key);
    }
  };
}

async function hold(file: FileToRead): Promise<Held> {
  const { captures } = await readFile(file.path, file.setup);
  const pyramids = new Map<string, Pyramid>();
  const samples = captures.flatMap((capture) =>
    capture.channels.map((channel) => channel.samples.byteLength),
  );
  return {
    captures,
    pyramid(record, position) {
      const key = `${record}/${position}`;
      const known = pyramids.get(key);
      if (known) return known;
      const channel = captures[record].channels.find((candidate) => candidate.position === position);
      const built = buildPyramid(channel?.samples ?? new Float64Array(0));
      pyramids.set(key, built);
      return built;
    },
    // A pyramid adds 2/32 · 8/7 of the samples: a fourteenth.
    bytes: samples.reduce((sum, bytes) => sum + bytes, 0) * (1 + 1 / 14),
  };
}
