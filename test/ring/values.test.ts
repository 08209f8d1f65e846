import { describe, expect, it } from "vitest";
import { scoreHardNoise } from "../reference/hard-noise.ts";
import { scoreTroubledRings } from "../reference/value-score.ts";

// Truth: the formula the rings are made from. Few trials; the benchmark prints the whole set.
describe("L by an exact capacitor at 40 dB and more", () => {
  const { relative, missed, invented, missing } = scoreTroubledRings(120, 1);

  it("hum, bursts and clipping among them: median 0.01 %, worst 0.3 %", () => {
    expect(relative[60]).toBeLessThan(1e-4);
    expect(relative.at(-1)).toBeLessThan(3e-3);
  });

  it("no pulse is missed, invented or left without its L", () =>
    expect({ missed, invented, missing }).toEqual({ missed: 0, invented: 0, missing: 0 }));

  // Trials in which a burst leaves the quiet and the swing of a switch-off behind.
  it.each([20250, 20790, 21566])("a burst in the ring begins no pulse (trial %i)", (trial) => {
    expect(scoreTroubledRings(1, trial)).toMatchObject({ missed: 0, invented: 0 });
  });
});

// A share p of n trials scatters by √(p(1 − p)/n); the limit is 93 % less three of them.
it.each(["hum", "8 bits, little noise", "slow baseline", "coupled secondary"] as const)(
  "twice the uncertainty holds with %s",
  (noise) => {
    const n = 100;
    const { read, f, a, l } = scoreHardNoise(n, 1, noise);
    expect(read).toBe(n);
    for (const held of [f, a, l]) expect(held / n).toBeGreaterThan(0.93 - 3 * Math.sqrt((0.05 * 0.95) / n));
  },
);
