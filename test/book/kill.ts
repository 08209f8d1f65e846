import { spawn } from "node:child_process";
import { join } from "node:path";
import { openBook } from "../../app/host/book/index.ts";

export const writerOn = (path: string, ...args: string[]) =>
  spawn(process.execPath, ["--import", "tsx", join(import.meta.dirname, "writer.ts"), path, ...args], {
    stdio: ["ignore", "pipe", "inherit"],
  });

/**
 * Kills a writer at a moment of chance after its first kept run; answers the runs it said it kept.
 * @param wait a number from 0 to 1
 */
export async function killWriter(path: string, wait: number): Promise<number[]> {
  const writer = writerOn(path);
  let said = "";
  writer.stdout.on("data", (text) => {
    if (said === "") setTimeout(() => writer.kill("SIGKILL"), wait * 120);
    said += text;
  });
  await new Promise((done) => writer.on("close", done));
  return [...said.matchAll(/^kept (\d+)$/gm)].map((match) => Number(match[1]));
}

/** What is wrong with the book after kills: acknowledged runs that are not whole, or a lock left behind. */
export async function faultsOf(path: string, acknowledged: number[]): Promise<string[]> {
  const book = await openBook(path);
  try {
    const lost = acknowledged.filter((run) => book.run(run).counts.pulses !== 20);
    const faults = lost.map((run) => `run ${run} is not whole`);
    if (book.readOnly) faults.push(`opened read-only: ${book.note}`);
    book.setPreference("after", "written");
    return faults;
  } catch (error) {
    return [(error as Error).message];
  } finally {
    book.close();
  }
}
