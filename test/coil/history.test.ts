import { describe, expect, it } from "vitest";
import { departures, type CoilRun } from "../../analysis/coil/history.ts";

const figure = (value: number) => ({ value, u: value / 1000 });
const run = (day: number, inductance: number, q: number, capacitance = 3.3e-7): CoilRun => ({
  day,
  capacitance_F: figure(capacitance),
  inductance_H: figure(inductance),
  q: figure(q),
  resistance20_ohm: null,
});
const before = [run(0, 5.8e-3, 16.6), run(30, 5.79e-3, 16.5), run(60, 5.81e-3, 16.7)];

describe("a coil's run beside those before it", () => {
  // A shorted turn is a loaded secondary: it takes flux (L falls) and adds loss (Q falls); common practice, no source.
  it("is read as shorted turns where L and Q fall together", () => {
    const flags = departures([...before, run(90, 5.4e-3, 10)]);
    expect(flags.slice(0, 3)).toEqual([null, null, null]);
    expect(flags[3]).toContain("L is 6.9 % below the runs before");
    expect(flags[3]).toContain("what shorted turns look like");
  });

  it("is not, where L alone falls", () => {
    expect(departures([...before, run(90, 5.4e-3, 16.6)])[3]).not.toContain("shorted");
  });

  it("is held against runs with the same capacitor: Q goes with its root", () => {
    expect(departures([...before, run(90, 5.8e-3, 30, 1e-7)])[3]).toBeNull();
  });
});
