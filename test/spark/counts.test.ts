import { describe, expect, it } from "vitest";
import type { PulseReading, Verdict } from "../../analysis/reading-format.ts";
import { countPulses } from "../../analysis/spark/counts.ts";

function pulse(verdict: Verdict, ruled: Verdict | null = null): PulseReading {
  return {
    spark: { verdict },
    ruled: ruled && { verdict: ruled, at: "", remark: "" },
  } as unknown as PulseReading;
}

const times = (n: number, of: PulseReading) => Array.from({ length: n }, () => of);

describe("counts and the misfire rate", () => {
  it("4 misfires of 20: Clopper–Pearson at 95 % (0.0573 to 0.4366: beta quantiles of the handbook's formula)", () => {
    const counts = countPulses([...times(16, pulse("spark")), ...times(4, pulse("no-spark"))], {
      expected: "spark",
    });
    expect(counts).toMatchObject({ pulses: 20, sparks: 16, quiet: 4, unclear: 0, misfires: 4 });
    expect(counts.misfireRate!.value).toBeCloseTo(0.2, 12);
    expect(counts.misfireRate!.low).toBeCloseTo(0.0573, 4);
    expect(counts.misfireRate!.high).toBeCloseTo(0.4366, 4);
  });

  it("unclear pulses leave the value alone and widen the rate to both sides", () => {
    const sure = [...times(15, pulse("spark")), ...times(5, pulse("no-spark"))];
    const without = countPulses(sure, { expected: "spark" }).misfireRate!;
    const unclear = countPulses([...sure, ...times(4, pulse("unclear"))], { expected: "spark" }).misfireRate!;
    expect(unclear.value).toBe(without.value);
    expect(unclear.low).toBeLessThan(without.low);
    expect(unclear.high).toBeGreaterThan(without.high);
  });

  it("the user's own verdict wins", () => {
    const counts = countPulses([pulse("spark", "no-spark"), pulse("unclear", "spark")], {
      expected: "spark",
    });
    expect(counts).toMatchObject({ sparks: 1, quiet: 1, unclear: 0, misfires: 1 });
  });

  it("no misfires where no spark was expected; no rate of no pulses", () => {
    expect(countPulses([pulse("no-spark")], {})).toMatchObject({ misfires: null, misfireRate: null });
    expect(countPulses([], { expected: "spark" })).toMatchObject({ misfires: 0, misfireRate: null });
  });
});
