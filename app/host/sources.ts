import { readdir, stat } from "node:fs/promises";
import { basename, dirname, join, resolve } from "node:path";
import type { Setup } from "../../analysis/setup/schema.ts";
import { CallError, describeFailure, type Failure } from "./failure.ts";
import type { Remembered } from "./remembered.ts";
import { isCaptureFile, isFurtherChannel, isSidecar } from "./reading/index.ts";
import { readSetups, type MergedSetup } from "./setups.ts";

export interface CaptureSource extends MergedSetup {
  /** As it was given, or the given folder with the file's name. */
  path: string;
  /** Where it is read from, its own place gone. */
  copy?: string;
  /** Answers given earlier for files of its layout that its setup holds. */
  remembered?: Remembered[];
}

/** Captures of one setup in one go: `setup.run`, else the folder. */
export interface RunOfSources {
  /** Tells runs apart: a stated name, or the folder's path. */
  key: string;
  name: string;
  folder: string | null;
  files: CaptureSource[];
}

export interface Sources {
  /** In the order given; a folder's files by name. */
  files: CaptureSource[];
  problems: ({ file: string } & Failure)[];
}

/** Paths of files and folders → capture files with their setups; what can't be used is a problem. */
export async function findSources(paths: string[], stated: Setup | null): Promise<Sources> {
  const found: Sources = { files: [], problems: [] };
  const seen = new Set<string>();
  for (const path of paths) {
    for (const file of await orProblem(found, path, () => filesAt(path), [])) {
      if (seen.has(resolve(file)) || isSetupFile(file)) continue;
      seen.add(resolve(file));
      const setup = await orProblem(found, file, () => readSetups(file, stated), null);
      // Further channels of a shot are read with its first file.
      if (setup && !isFurtherChannel(file, setup.setup)) found.files.push({ path: file, ...setup });
    }
  }
  return found;
}

/** What can't be had is a problem of its own file only: the others of the folder are still read. */
async function orProblem<T>(found: Sources, file: string, get: () => Promise<T>, otherwise: T): Promise<T> {
  try {
    return await get();
  } catch (error) {
    found.problems.push({ file, ...describeFailure(error) });
    return otherwise;
  }
}

const byName = new Intl.Collator("en", { numeric: true });

/** A folder's own capture files, without its subfolders'; a file named outright is taken as it is. */
async function filesAt(path: string): Promise<string[]> {
  if (!(await stat(path)).isDirectory()) return [path];
  const entries = await readdir(path, { withFileTypes: true });
  const names = entries
    .filter((entry) => !entry.isDirectory() && isCaptureFile(entry.name))
    .map(({ name }) => name);
  if (names.length === 0)
    throw new CallError(
      "no-captures",
      "there is no capture in this folder. Captures end in .csv, .txt, .tsv or .dat, also with .gz; subfolders are not searched",
    );
  const files = names.toSorted(byName.compare).map((name) => join(path, name));
  const sidecars = await Promise.all(files.map(isSidecar));
  return files.filter((_, i) => !sidecars[i]);
}

/** Dropped or named along with the captures it belongs to; it is read with each of them. */
const isSetupFile = (path: string) => /(^|\.)setup\.json$/.test(basename(path));

/** `named` puts all files into one run; else `setup.run`, else the folder decides. */
export function groupIntoRuns(files: CaptureSource[], named: string | null): RunOfSources[] {
  const runs = new Map<string, RunOfSources>();
  for (const file of files) {
    const name = named ?? file.setup.run ?? null;
    const folder = dirname(resolve(file.path));
    const key = name === null ? `folder:${folder}` : `name:${name}`;
    const run = runs.get(key) ?? {
      key,
      name: name ?? basename(folder),
      folder: name === null ? folder : null,
      files: [],
    };
    run.files.push(file);
    runs.set(key, run);
  }
  return [...runs.values()];
}
