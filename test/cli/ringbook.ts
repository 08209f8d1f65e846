import { spawnSync } from "node:child_process";
import { join } from "node:path";

const root = join(import.meta.dirname, "..", "..");
export const samples = join(root, "samples", "bench-run");

/** The built command line, as a user runs it. */
export function ringbook(...args: string[]) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [join(root, "dist/app/cli.js"), ...args], {
    encoding: "utf8",
    maxBuffer: 1 << 28,
  });
  return { status, stdout, stderr, lines: stdout.split("\n").filter(Boolean) };
}
