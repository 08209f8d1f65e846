import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import { createHost, type Host } from "../../app/host/host.ts";
import { samples } from "../cli/ringbook.ts";

/** The real host on a new book, with the built worker. */
export async function temporaryHost(): Promise<{ host: Host; end: () => Promise<void> }> {
  const folder = mkdtempSync(join(tmpdir(), "ringbook-door-"));
  const host = await createHost({
    bookPath: join(folder, "book.db"),
    workerUrl: pathToFileURL(join(import.meta.dirname, "../../dist/app/worker.js")),
    demo: samples,
  });
  return {
    host,
    async end() {
      await host.close();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}
