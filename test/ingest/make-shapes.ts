/** `npx tsx test/ingest/make-shapes.ts` writes the shapes' test files anew. All their numbers are invented. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { shapes } from "./shapes/index.ts";

const folder = join(import.meta.dirname, "fixtures");
mkdirSync(folder, { recursive: true });
for (const { file, bytes } of shapes) writeFileSync(join(folder, file), bytes);
console.log(`${shapes.length} files written to test/ingest/fixtures`);
