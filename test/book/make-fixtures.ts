/**
 * Writes the committed schema and, once for each format, a small book of that format. A book of an older
 * format is never made anew: it is what a user's book of that time looks like.
 */
import { existsSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { openBook } from "../../app/host/book/index.ts";
import { migrations } from "../../app/host/book/schema.ts";
import { judged, temporaryFolder } from "./runs.ts";
import { schemaText } from "./schema-text.ts";

const fixture = (name: string) => join(import.meta.dirname, "fixtures", name);
const place = temporaryFolder();
const fresh = join(place.folder, "bench.db");
const book = await openBook(fresh);
const run = book.ensureRun({ key: "name:old run", name: "old run", folder: null });
const verdicts = ["spark", "spark", "no-spark", "spark", "spark"] as const;
book.keepRun(run, judged([{ name: "old.csv", verdicts: [...verdicts] }]));
book.rule(1, 0, "no-spark", "was a reflection");
const kept = fixture(`book-${migrations.length}.db`);
if (!existsSync(kept)) await book.backup(kept);
book.close();
writeFileSync(fixture("schema.sql"), schemaText(fresh));
place.remove();
