import { randomBytes } from "node:crypto";
import { mkdir, writeFile } from "node:fs/promises";
import { basename, dirname, join } from "node:path";
import { CallError } from "./failure.ts";

export interface Uploads {
  /** Keeps the bytes in a folder of the host's own and answers a name that `open` understands. */
  add(name: string, bytes: Uint8Array): Promise<{ file: string }>;
  pathOf(file: string): string;
}

/**
 * Bytes that a window sent. Files that were dropped together from one folder ("run-7/pulse-01.csv")
 * lie together here, with their setup.json; a name seen before in that folder starts a new one, so that
 * nothing is overwritten. They stay: a run is computed again from them when its setup changes.
 */
export function createUploads(folder: string): Uploads {
  const paths = new Map<string, string>();
  const batches = new Map<string, { folder: string; names: Set<string> }>();

  async function batchFor(group: string, name: string) {
    const current = batches.get(group);
    if (current && !current.names.has(name)) return current;
    const fresh = { folder: join(folder, newId(), group), names: new Set<string>() };
    batches.set(group, fresh);
    await mkdir(fresh.folder, { recursive: true });
    return fresh;
  }

  return {
    async add(given, bytes) {
      const { group, name } = safeName(given);
      const batch = await batchFor(group, name);
      batch.names.add(name);
      const path = join(batch.folder, name);
      await writeFile(path, bytes, { flag: "wx" });
      const file = newId();
      paths.set(file, path);
      return { file };
    },
    pathOf(file) {
      const path = paths.get(file);
      if (path) return path;
      throw new CallError("no-such-file", "the file is not here any more. Drop it again");
    },
  };
}

const newId = () => randomBytes(9).toString("base64url");

/** The file's own name and its folder's, with nothing in them that means something to a file system. */
function safeName(given: string): { group: string; name: string } {
  const slashes = given.replaceAll("\\", "/");
  const name = clean(basename(slashes));
  if (name === "" || name === "_") throw new CallError("wrong-argument", "the file has no name");
  const parent = slashes.includes("/") ? clean(basename(dirname(slashes))) : "";
  return { group: parent === "" ? "dropped" : parent, name };
}

const clean = (part: string) =>
  part
    .replace(/[\p{Cc}<>:"|?*/]/gu, "_")
    .replace(/^\.+/, "_")
    .slice(-120);
