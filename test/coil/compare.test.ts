import { expect, it } from "vitest";
import { compareRuns, type RunFigures } from "../../analysis/coil/compare.ts";
import { countsOf } from "../../analysis/spark/counts.ts";

const run = (quiet: number, sparks: number, q: number): RunFigures => ({
  counts: countsOf({ sparks, quiet, unclear: 3 }, {}),
  combined: { inductance_H: null, capacitance_F: null, resistance_ohm: null, q: { value: q, u: 0.3 } },
});

it("gives the second run less the first, with Newcombe's interval for the rates", () => {
  // Newcombe, Statistics in Medicine 17, 1998, table II, 56/70 against 48/80 by method 10 (from memory):
  // difference 0.2, 0.0524 to 0.3339.
  const { quietRate, q, inductance_H } = compareRuns(run(48, 32, 20), run(56, 14, 19));
  expect(quietRate?.value).toBeCloseTo(0.2, 10);
  expect(quietRate?.low).toBeCloseTo(0.0524, 4);
  expect(quietRate?.high).toBeCloseTo(0.3339, 4);
  expect(q?.value).toBe(-1);
  expect(q?.u).toBeCloseTo(0.4243, 4);
  expect(inductance_H).toBeNull();
});
