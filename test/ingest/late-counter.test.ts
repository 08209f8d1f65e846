import { expect, it } from "vitest";
import { ingestBytes } from "../../analysis/ingest/index.ts";

const rows = (of: (k: number) => string) =>
  new TextEncoder().encode(Array.from({ length: 400 }, (_, k) => of(k + 123)).join("\n"));
const value = (k: number) => (50 * Math.sin(k / 7)).toFixed(2);

it("takes a running number for one although the file's beginning is lost, and the time beside it for the time", () => {
  const [capture] = ingestBytes(
    rows((k) => `${k},${(k * 2e-6).toExponential(6)},${value(k)}`),
    {},
  );
  expect(capture.timebase.step_s).toBeCloseTo(2e-6, 15);
  expect(capture.channels).toHaveLength(1);
});

it("never turns a running number into seconds, wherever it begins", () => {
  const [capture] = ingestBytes(
    rows((k) => `${k},${value(k)}`),
    {},
  );
  expect(capture.timebase.step_s).toBeNull();
  expect(capture.notes.some(({ question }) => question)).toBe(true);
});

it("takes an exponent after D only as Fortran writes it, signed: a stray letter among digits is no power of ten", () => {
  const [capture] = ingestBytes(
    rows((k) => `${(k * 2e-6).toExponential(6)},${k === 300 ? "14.2D1" : value(k).replace(/$/, "D+00")}`),
    {},
  );
  const [{ samples }] = capture.channels;
  expect(samples[0]).toBeCloseTo(Number(value(123)), 10);
  expect(samples[300 - 123]).toBeNaN();
});

it("tells the running number from the time across blank, lost, doubled and damaged lines", () => {
  const line = (k: number) => `${k},${(k * 2e-6).toExponential(6)},${value(k)}`;
  const file = Array.from({ length: 400 }, (_, k) => line(k));
  file.splice(90, 0, ",,,");
  file.splice(150, 1);
  file.splice(200, 0, file[200]);
  file[300] = file[300].replace("300", "3x0");
  const [capture] = ingestBytes(new TextEncoder().encode(["Time(S),Node(V)", ...file].join("\n")), {});
  expect(capture.timebase.step_s! / 2e-6).toBeCloseTo(1, 2);
  expect(capture.channels.map(({ name }) => name)).toEqual(["Node"]);
});

it("a damaged cell does not make grouping marks of the separators", () => {
  const line = (k: number) =>
    `${(k * 2e-6).toExponential(6)}, ${value(k)}, ${k === 300 ? "0.,792" : "0.5728"}, `;
  const [capture] = ingestBytes(
    rows((k) => line(k)),
    {},
  );
  // RFC 4180, section 2.4: the commas part cells, so that the damaged one is "0.".
  expect(capture.channels[1].samples[300 - 123]).toBe(0);
});

it.each(["0'242", "1'242", "0,242"])("a damaged decimal mark makes no thousands of %s", (cell) => {
  const [{ channels, notes }] = ingestBytes(
    rows((k) => `${(k * 2e-6).toExponential(6)};${k === 300 ? cell : value(k)};`),
    {},
  );
  expect(channels[0].samples[300 - 123]).toBeNaN();
  expect(notes.map(({ code }) => code)).toContain("unreadable-cells");
});
