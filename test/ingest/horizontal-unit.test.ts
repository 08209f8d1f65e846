import { expect, it } from "vitest";
import { ingestBytes } from "../../analysis/ingest/index.ts";

const read = (header: string[], row: (k: number) => string, setup = {}) => {
  const rows = Array.from({ length: 300 }, (_, k) => row(k));
  return ingestBytes(new TextEncoder().encode([...header, ...rows].join("\n")), setup)[0];
};
const value = (k: number) => (k % 19) / 8;
const header = (unit: string, interval: string) => [
  `Horizontal Units,${unit}`,
  `Sample Interval,${interval}`,
];

it("an interval without a unit beside a horizontal unit of ms is asked where no time column tells", () => {
  const { timebase, notes } = read(header("ms", "0.008"), (k) => `${value(k)},`);
  expect(timebase.step_s).toBeNull();
  const asked = notes.find(({ code }) => code === "interval-unknown");
  expect(asked?.choices).toEqual(["0.008", "0.000008"]);
});

it("where column and interval are the same number, the unit is questioned and can be stated", () => {
  const row = (k: number) => `${(k * 0.008).toFixed(4)},${value(k)}`;
  const { notes } = read(header("ms", "0.008"), row);
  expect(notes.some(({ code, answers }) => code === "time-unit-assumed" && answers === "timeUnit")).toBe(
    true,
  );
  expect(read(header("ms", "0.008"), row, { timeUnit: "ms" }).timebase.step_s).toBeCloseTo(8e-6, 12);
});

it("a column in ms beside an interval in seconds settles itself", () => {
  const { timebase, notes } = read(header("ms", "8e-6"), (k) => `${(k * 0.008).toFixed(4)},${value(k)}`);
  expect(timebase.step_s).toBeCloseTo(8e-6, 12);
  expect(notes.filter(({ code }) => code === "time-unit-assumed")).toEqual([]);
});

it("an interval that only fits as seconds is not questioned", () => {
  const { timebase, notes } = read(header("us", "4.0e-06"), (k) => `${value(k)},`);
  expect(timebase.step_s).toBe(4e-6);
  expect(notes.filter(({ question }) => question).map(({ code }) => code)).not.toContain("interval-unknown");
});
