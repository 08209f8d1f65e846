import { readFile } from "node:fs/promises";
import { basename, dirname, join } from "node:path";
import { mergeSetups } from "../../analysis/setup/merge.ts";
import { parseSetup, SetupError } from "../../analysis/setup/parse.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import type { SetupOrigin } from "../bridge.ts";

export interface MergedSetup {
  setup: Setup;
  /** Per setup key: which statement won. */
  origins: Record<string, SetupOrigin>;
}

/**
 * The setup of one capture file: what is stated, completed key by key by `NAME.setup.json` beside
 * `NAME.csv` and then by the folder's `setup.json`. Throws SetupError naming the file and the field.
 */
export async function readSetups(captureFile: string, stated: Setup | null): Promise<MergedSetup> {
  const folder = dirname(captureFile);
  const stem = basename(captureFile).replace(/(\.[a-z]+)(\.gz)?$/i, "");
  const layers: [SetupOrigin, Setup | null][] = [
    ["stated", stated],
    ["file setup", await readSetupIfThere(join(folder, `${stem}.setup.json`))],
    ["folder setup", await readSetupIfThere(join(folder, "setup.json"))],
  ];
  const origins: Record<string, SetupOrigin> = {};
  for (const [origin, setup] of layers)
    for (const [key, value] of Object.entries(setup ?? {}))
      if (key !== "format" && value !== null && value !== undefined) origins[key] ??= origin;
  return { setup: mergeSetups(layers.flatMap(([, setup]) => setup ?? [])), origins };
}

/** What is stated from now on; a key changed to null is stated no more. Throws SetupError. */
export function changedSetup(stated: Setup | null, change: Record<string, unknown>): Setup {
  const merged = Object.entries({ ...stated, ...change });
  return parseSetup(Object.fromEntries(merged.filter(([, value]) => value !== null && value !== undefined)));
}

/** A setup file that must be there (`--setup FILE`). */
export async function readSetupFile(path: string): Promise<Setup> {
  const text = await readFile(path, "utf8");
  let json: unknown;
  try {
    json = JSON.parse(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    throw inFile(path, [{ field: "(whole file)", text: `is not JSON: ${(error as Error).message}` }]);
  }
  try {
    return parseSetup(json);
  } catch (error) {
    if (error instanceof SetupError) throw inFile(path, error.problems);
    throw error;
  }
}

async function readSetupIfThere(path: string): Promise<Setup | null> {
  try {
    return await readSetupFile(path);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return null;
    throw error;
  }
}

function inFile(path: string, problems: { field: string; text: string }[]): SetupError {
  return new SetupError(problems.map(({ field, text }) => ({ field: `${field} in ${path}`, text })));
}
