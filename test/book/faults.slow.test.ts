import { join } from "node:path";
import { expect, it } from "vitest";
import { openBook } from "../../app/host/book/index.ts";
import { faultsOf, killWriter, writerOn } from "./kill.ts";
import { temporaryFolder } from "./runs.ts";

it("loses no acknowledged run in 200 kills at moments of chance", async () => {
  const place = temporaryFolder();
  const path = join(place.folder, "bench.db");
  const acknowledged: number[] = [];
  for (let i = 0; i < 200; i++) acknowledged.push(...(await killWriter(path, (i * 0.6180339887) % 1)));
  expect(acknowledged.length).toBeGreaterThan(200);
  expect(await faultsOf(path, acknowledged)).toEqual([]);
  place.remove();
});

it("says that another program is writing when the book stays locked", async () => {
  const place = temporaryFolder();
  const path = join(place.folder, "bench.db");
  const book = await openBook(path);
  const holder = writerOn(path, "hold");
  await new Promise((held) => holder.stdout.once("data", held));
  expect(() => book.setPreference("a", "b")).toThrow("another program is writing to the book");
  holder.kill("SIGKILL");
  await new Promise((done) => holder.on("close", done));
  book.setPreference("a", "b");
  expect(book.preferences()).toEqual({ a: "b" });
  book.close();
  place.remove();
});
