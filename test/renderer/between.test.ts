/** What lies between two runs, in words. */
import { expect, it } from "vitest";
import { rateDifference } from "../../analysis/statistics/proportion.ts";
import { between, farApart } from "../../renderer/compare/between.ts";

const rate = (hits: number, trials: number, others: number, of: number) => {
  const difference = rateDifference({ hits, trials }, { hits: others, trials: of }, 0.95);
  return difference && { ...difference, level: 0.95 };
};

it("says which way a rate moved and whether chance explains it", () => {
  expect(between(rate(1, 20, 15, 20))).toMatch(
    /^Of a hundred pulses 70\.0 more .*\(\d+\.\d more to \d+\.\d more at 95 %\): more than/,
  );
  expect(between(rate(17, 54, 1, 4))).toMatch(
    /^Of a hundred pulses 6\.5 fewer .*\(\d+\.\d fewer to \d+\.\d more at 95 %\): chance/,
  );
  expect(between(rate(0, 0, 1, 4))).toContain("can't be compared");
});

it("names the figures that differ by more than twice their uncertainty", () => {
  const of = (value: number) => ({ name: `by ${value}`, difference: { value, u: 1 } });
  expect(farApart([of(1.9), of(-2.1), of(3)])).toBe(
    "by -2.1 and by 3 differ by more than the uncertainty explains (k = 2).",
  );
  expect(farApart([of(1)])).toContain("No figure differs");
  expect(farApart([{ name: "L", difference: null }])).toBe("No figure was measured in both runs.");
});
