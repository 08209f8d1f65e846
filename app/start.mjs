// `npm start`: builds when dist is missing or older than its sources, then starts what was built.
import { spawnSync } from "node:child_process";
import { readdirSync, statSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const root = fileURLToPath(new URL("..", import.meta.url));
const built = join(root, "dist/app/start.js");

/** Newest change below a path, in ms; 0 where there is nothing. */
function newest(path) {
  const entry = statSync(path, { throwIfNoEntry: false });
  if (!entry?.isDirectory()) return entry?.mtimeMs ?? 0;
  return readdirSync(path).reduce((latest, name) => Math.max(latest, newest(join(path, name))), 0);
}

const sources = ["analysis", "app", "renderer", "package.json", "package-lock.json", "vite.config.ts"];
const builtAt = statSync(built, { throwIfNoEntry: false })?.mtimeMs ?? 0;
if (sources.some((source) => newest(join(root, source)) > builtAt)) {
  console.error("building …");
  const vite = join(root, "node_modules/vite/bin/vite.js");
  const run = spawnSync(process.execPath, [vite, "build", "--app", "--logLevel", "warn"], {
    cwd: root,
    stdio: ["ignore", 2, 2],
  });
  if (run.status !== 0) {
    console.error("the build failed; its messages are above");
    process.exit(1);
  }
}
await import(new URL("../dist/app/start.js", import.meta.url).href);
