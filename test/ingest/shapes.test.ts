/** Every shape and pitfall of the catalogue, against what the script that made the file knows of it. */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { ingestBytes } from "../../analysis/ingest/index.ts";
import { ReadingError } from "../../analysis/errors.ts";
import type { Capture } from "../../analysis/capture.ts";
import { shapes } from "./shapes/index.ts";
import type { ExpectedRecord, ShapeFile } from "./shapes/shape.ts";

const committed = (file: string) => new Uint8Array(readFileSync(join(import.meta.dirname, "fixtures", file)));

describe.each(shapes.map((shape) => [`${shape.shape} ${shape.file}: ${shape.what}`, shape] as const))(
  "%s",
  (_, shape) => {
    it("is the file the script makes", () => {
      expect(Buffer.compare(committed(shape.file), shape.bytes)).toBe(0);
    });

    it(shape.outcome === "refused" ? "is refused by name" : `is ${shape.outcome}`, () => {
      if (shape.outcome === "refused") return expectRefusal(shape);
      const captures = ingestBytes(committed(shape.file), shape.setup ?? {}, shape.file);
      expect(captures.map(({ record }) => record.index)).toEqual(shape.records.map((_, i) => i));
      captures.forEach((capture, i) => expectRecord(capture, shape.records[i]));
      const codes = captures.flatMap(({ notes }) => notes.map(({ code }) => code));
      for (const code of shape.notes ?? []) expect(codes).toContain(code);
      const questions = captures[0].notes.filter(
        ({ question, code }) => question && !/assumed|guessed/.test(code),
      );
      expect(questions.length > 0, JSON.stringify(questions)).toBe(shape.outcome === "asked");
      if (shape.acquisition) expect(captures[0].acquisition).toEqual(shape.acquisition);
    });
  },
);

function expectRefusal(shape: ShapeFile): void {
  let thrown: unknown;
  try {
    ingestBytes(committed(shape.file), shape.setup ?? {});
  } catch (error) {
    thrown = error;
  }
  expect(thrown).toBeInstanceOf(ReadingError);
  expect((thrown as ReadingError).code).toBe(shape.refused);
}

function expectNear(value: number, expected: number): void {
  if (Number.isNaN(expected)) expect(value).toBeNaN();
  else expect(value).toBeCloseTo(expected, 9);
}

function expectRecord({ channels, timebase }: Capture, expected: ExpectedRecord): void {
  expect(channels.map(({ name }) => name)).toEqual(expected.names);
  expect(channels.map(({ unit }) => unit)).toEqual(expected.units);
  const positions = expected.positions ?? expected.names.map((_, i) => i);
  expect(channels.map(({ position }) => position)).toEqual(positions);
  expect(timebase.samples).toBe(expected.samples);
  for (const [i, { samples }] of channels.entries()) {
    expect(samples.length).toBe(expected.samples);
    expectNear(samples[0], expected.first[i]);
    expectNear(samples[samples.length - 1], expected.last[i]);
  }
  if (expected.step_s === null) return expect(timebase.step_s).toBeNull();
  const error = Math.abs((timebase.step_s ?? NaN) / expected.step_s - 1);
  expect(error).toBeLessThanOrEqual(expected.stepTolerance ?? 1e-9);
  // A rounded column must own up: the error stays within three standard uncertainties.
  expect(error * expected.step_s).toBeLessThanOrEqual(
    3 * timebase.stepUncertainty_s + 1e-9 * expected.step_s,
  );
  if (expected.start_s !== undefined) expect(timebase.start_s).toBeCloseTo(expected.start_s, 9);
}
