import { expect, it } from "vitest";
import { quantile, scoreRun, sparkSet, tally } from "../reference/spark-score.ts";

/** The full set, ≥ 2,000 sparks and ≥ 3,000 quiet pulses: what `npm run bench -- spark` prints, held fast here. */
it("full simulated set: no worse than the figures of DEVELOPERS.md", () => {
  const t = tally([...sparkSet(32)].flatMap(scoreRun));
  expect(t.sparks).toBeGreaterThan(2000);
  expect(t.quiet).toBeGreaterThan(3000);
  expect(t.alarms / t.quiet).toBeLessThanOrEqual(0.01);
  expect(t.called / t.sparks).toBeGreaterThan(0.9);
  expect(t.unclear / (t.sparks + t.quiet)).toBeLessThan(0.03);
  expect(t.brier).toBeLessThan(0.02);
  expect(quantile(t.onsets, 0.5)).toBeLessThan(0.02);
});
