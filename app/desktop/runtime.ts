import { existsSync, readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { dirname, join } from "node:path";

/**
 * The Electron runtime beside its package; null where it was not downloaded. The package itself is not
 * imported for that: importing it would start the download.
 */
export function electronRuntime(from: string | URL): string | null {
  try {
    const folder = dirname(createRequire(from).resolve("electron/package.json"));
    const name = readFileSync(join(folder, "path.txt"), "utf8");
    const path = join(process.env.ELECTRON_OVERRIDE_DIST_PATH ?? join(folder, "dist"), name);
    return existsSync(path) ? path : null;
  } catch {
    return null;
  }
}
