/** Reads the demo run once for all window tests; each gets a copy of the book (see door.ts). */
import { existsSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createHost } from "../../app/host/host.ts";
import { chromiumPath } from "./chromium-path.ts";
import { demo, workerUrl } from "./door.ts";

export default async function prepare(): Promise<(() => void) | undefined> {
  // Without a Chromium or a build the tests themselves say what is missing.
  if (!existsSync(chromiumPath) || !existsSync(workerUrl)) return undefined;
  const folder = mkdtempSync(join(tmpdir(), "ringbook-demo-"));
  const bookPath = join(folder, "book.db");
  const host = await createHost({ bookPath, workerUrl, demo });
  await host.answer("openDemo", {});
  await host.idle();
  await host.close();
  process.env.RINGBOOK_DEMO_BOOK = bookPath;
  return () => rmSync(folder, { recursive: true, force: true });
}
