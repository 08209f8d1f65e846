import { expect, it } from "vitest";
import { statementWords } from "../../analysis/setup/words.ts";

it("says what was stated in words and units", () => {
  const words = (setup: Parameters<typeof statementWords>[1]) =>
    (Object.keys(setup) as Parameters<typeof statementWords>[0][]).flatMap((key) =>
      statementWords(key, setup),
    );
  expect(
    words({
      format: "ringbook.setup/1",
      capacitor_F: { value: 3.3e-7, tolerance: 0.05, k: 2 },
      strayCapacitance_F: 2e-10,
      windingTemperature_C: -5,
      turnsRatio: 80,
      expected: "no-spark",
      timeUnit: "us",
      supply_V: null,
      gap: { distance_m: 0.007, electrodes: "points" },
      channels: [
        { position: 0, role: "switch-node", scale: 10 },
        { file: "b.csv", role: "coil-current", unit: "A" },
      ],
    }),
  ).toEqual([
    ["capacitor", "330 nF ± 5 % (k = 2)"],
    ["stray capacitance", "200 pF"],
    ["winding temperature", "−5 °C"],
    ["turns ratio", "80"],
    ["a spark is expected", "no"],
    ["unit of the time column", "µs"],
    ["gap", "7 mm, between points"],
    ["channel 1", "switch node, times 10"],
    ["channel in b.csv", "coil current, in A"],
  ]);
});
