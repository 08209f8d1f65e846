/** Files that belong to a capture file: settings beside bare numbers, and further channels saved each by itself. */
import { createHash } from "node:crypto";
import { open, readdir, stat } from "node:fs/promises";
import { basename, dirname, join, resolve } from "node:path";
import { decodeText } from "../../../analysis/ingest/index.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";

const captureEnding = /\.(csv|txt|tsv|dat)(\.gz)?$/i;
const longestSidecar_bytes = 64 * 1024;
/** What tells the channels of one shot apart at a name's end: "_ch2", "-C1", "_B". */
const channelMark = /([_\-. ]|^)(ch|chan|channel|c|kanal|trace|in)?[ _-]?([1-9]|[A-D])$/i;

/** What a folder's listing takes for captures: by ending. */
export const isCaptureFile = (name: string) => captureEnding.test(name) && !name.startsWith(".");

const stemOf = (path: string) => basename(path).replace(/(\.[^.]+)(\.gz)?$/, "");

/** The settings of a neighbour with the same stem ("key:value:" lines and no data); null without one. */
export async function readSidecar(path: string): Promise<Settings | null> {
  const folder = dirname(path);
  for (const name of await readdir(folder)) {
    const neighbour = join(folder, name);
    if (name === basename(path) || stemOf(name) !== stemOf(path) || name.endsWith(".json")) continue;
    const settings = await settingsIn(neighbour);
    if (settings) return settings;
  }
  return null;
}

/** Whether a file holds settings for another capture file of the folder and no samples. */
export async function isSidecar(path: string): Promise<boolean> {
  const names = (await readdir(dirname(path))).filter((name) => name !== basename(path));
  if (!names.some((name) => isCaptureFile(name) && stemOf(name) === stemOf(path))) return false;
  return (await settingsIn(path)) !== null;
}

interface Settings {
  name: string;
  text: string;
  sha256: string;
}

export const hashOf = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");

async function settingsIn(path: string): Promise<Settings | null> {
  const { size } = await stat(path);
  if (size === 0 || size > longestSidecar_bytes || path.endsWith(".gz")) return null;
  const file = await open(path, "r");
  try {
    const bytes = new Uint8Array(size);
    await file.read(bytes, 0, size, 0);
    const text = decodeText(bytes);
    const lines = text.split(/[\r\n]+/).filter((line) => line.trim() !== "");
    const settings = lines.filter((line) => /^\s*\p{L}[^:=]*[:=]/u.test(line));
    if (lines.length < 2 || settings.length <= 0.8 * lines.length) return null;
    return { name: basename(path), text, sha256: hashOf(bytes) };
  } finally {
    await file.close();
  }
}

/** Capture files beside this one whose names differ from it in a channel mark alone, by name. */
export async function channelSiblings(path: string): Promise<string[]> {
  const [stem, ending] = [stemOf(path), basename(path).slice(stemOf(path).length)];
  if (!channelMark.test(stem)) return [];
  const shared = stem.replace(channelMark, "");
  const names = (await readdir(dirname(path))).filter(
    (name) => name !== basename(path) && name.endsWith(ending),
  );
  return names
    .filter((name) => channelMark.test(stemOf(name)) && stemOf(name).replace(channelMark, "") === shared)
    .toSorted();
}

/** Files the setup joins into one capture, the first one first; empty where this file is none of them. */
export function joinedFiles(path: string, setup: Setup): string[] {
  const names = [...new Set((setup.channels ?? []).flatMap(({ file }) => file ?? []))];
  const paths = names.map((name) => resolve(dirname(path), name));
  return names.length > 1 && paths.includes(resolve(path)) ? paths : [];
}

/** Whether the setup reads this file as a further channel of another one. */
export function isFurtherChannel(path: string, setup: Setup): boolean {
  const files = joinedFiles(path, setup);
  return files.length > 0 && files[0] !== resolve(path);
}
