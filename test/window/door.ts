/** The real host with a new book behind the real local door, as `npm start` serves it. */
import { copyFileSync, existsSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import { createHost, type Host } from "../../app/host/host.ts";
import { openLocalDoor, type LocalDoor } from "../../app/local/door.ts";
import type { Answer, Argument, CommandName } from "../../app/bridge.ts";

const root = join(import.meta.dirname, "../..");
const worker = join(root, "dist/app/worker.js");
export const workerUrl = pathToFileURL(worker);
export const demo = join(root, "samples/bench-run");

export interface TestDoor extends LocalDoor {
  host: Host;
  folder: string;
  ask<Name extends CommandName>(name: Name, argument: Argument<Name>): Promise<Answer<Name>>;
  /** Writes files into a folder of their own, reads them, and answers their run. */
  readIn(name: string, files: Record<string, string>): Promise<number>;
  /** Shut and remove everything. */
  end(): Promise<void>;
}

export async function openDoor(options: { demo?: boolean } = {}): Promise<TestDoor> {
  if (!existsSync(worker)) throw new Error("dist/ is missing: run npm run build before the window tests");
  const folder = mkdtempSync(join(tmpdir(), "ringbook-window-"));
  const prepared = options.demo ? process.env.RINGBOOK_DEMO_BOOK : undefined;
  if (prepared) copyFileSync(prepared, join(folder, "book.db"));
  const host = await createHost({
    bookPath: join(folder, "book.db"),
    workerUrl: pathToFileURL(worker),
    demo,
  });
  const door = await openLocalDoor(host, { page: join(root, "dist/renderer") });
  const ask: TestDoor["ask"] = async (name, argument) => {
    const reply = await host.answer(name, argument);
    if ("error" in reply) throw new Error(`${name}: ${reply.error.text}`);
    return reply.answer as never;
  };
  if (options.demo && !prepared) {
    await ask("openDemo", {});
    await host.idle();
  }
  return {
    ...door,
    host,
    folder,
    ask,
    async readIn(name, files) {
      const place = join(folder, name);
      mkdirSync(place);
      for (const [file, text] of Object.entries(files)) writeFileSync(join(place, file), text);
      const { job } = await ask("open", { sources: [{ path: place }] });
      await host.idle();
      const state = (await ask("jobs", {})).find((each) => each.job === job);
      if (!state || state.run === null) throw new Error(`${name}: ${JSON.stringify(state)}`);
      return state.run;
    },
    async end() {
      await door.close();
      await host.close();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
