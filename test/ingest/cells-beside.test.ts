import { expect, it } from "vitest";
import { ingestBytes } from "../../analysis/ingest/index.ts";

const row = (k: number) => `${((k - 100) * 2e-6).toExponential(4)},${(k % 23) / 8},`;
const read = (lines: string[]) => ingestBytes(new TextEncoder().encode(lines.join("\r\n")), {});
const rows = Array.from({ length: 3000 }, (_, k) => row(k));

it.each([50, 2500])("a cell in the column that is blank elsewhere is noted (row %i)", (stray) => {
  const [{ timebase, notes }] = read([
    "Time (s),Node (V),",
    ...rows.with(stray, `${row(stray).slice(0, -1)},7.25`),
  ]);
  expect(timebase.samples).toBe(3000);
  expect(notes.find(({ code }) => code === "cells-beside")?.text).toContain("7.25");
});

it("a column of marks that begins late is left out and said, however many there are", () => {
  const marked = rows.map((line, k) => (k > 1600 ? `${line}1` : line));
  const [{ timebase, notes }] = read(["Time (s),Node (V),", ...marked]);
  expect(timebase.samples).toBe(3000);
  expect(notes.map(({ code }) => code)).toContain("cells-beside");
});

it("settings right of the data are no stray cells", () => {
  const beside = rows.map((line, k) => (k < 4 ? `${line},Points,3000` : `${line},,`));
  const [{ notes }] = read(beside);
  expect(notes.map(({ code }) => code)).not.toContain("cells-beside");
});
