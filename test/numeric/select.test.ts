import { expect, test } from "vitest";
import { select } from "../../analysis/numeric/select.ts";
import { seeded } from "../reference/random.ts";

// Source: the sorting of typed arrays. The + 0 leaves no negative zero.
test("a selected value is the sorted array's, with ties and infinities among them", () => {
  const random = seeded(7);
  for (let round = 0; round < 200; round++) {
    const values = Float64Array.from({ length: 1 + (round % 40) }, () => Math.round(3 * random.normal()) + 0);
    if (round % 5 === 0) values[0] = Infinity;
    const sorted = values.toSorted();
    const k = round % values.length;
    expect(select(values, k)).toBe(sorted[k]);
  }
});
