import { describe, expect, it } from "vitest";
import { formatFigure, formatNumber } from "../../analysis/format/figure.ts";

describe("formatNumber", () => {
  it.each([
    [0.004123, "s", 3, "4.12 ms"],
    [0.0009996, "H", 3, "1.00 mH"],
    [412.3, "V", 3, "412 V"],
    [-12.34, "V", 3, "−12.3 V"],
    [0, "V", 3, "0 V"],
    [3.3e-7, "F", 2, "330 nF"],
    [47.26, "%", 2, "47 %"],
    [1e-18, "F", 3, "0.00100 fF"],
  ])("%d %s to %d digits is %s", (value, unit, digits, text) => {
    expect(formatNumber(value, unit, digits)).toBe(text);
  });

  it("a figure that could not be had is a dash, never a zero", () => {
    expect(formatNumber(null, "V")).toBe("–");
    expect(formatFigure(null, "H")).toBe("–");
  });
});

describe("formatFigure", () => {
  // The rounding examples of the Review of Particle Physics, section 5.3: 0.827 ± 0.119 is printed
  // 0.83 ± 0.12, and 0.827 ± 0.367 is printed 0.8 ± 0.4 (from memory).
  it.each([
    [0.827, 0.119, "", "0.83 ± 0.12"],
    [0.827, 0.367, "", "0.8 ± 0.4"],
    [0.00582, 0.00004, "H", "5.82 ± 0.04 mH"],
    [3421.7, 0.96, "Hz", "3.4217 ± 0.0010 kHz"],
    [21.3, 0.25, "", "21.30 ± 0.25"],
    [5.8, 0, "", "5.800"],
    [1234, 560, "V", "1.2 ± 0.6 kV"],
    [123456, 5600, "", "123000 ± 6000"],
    [-2e-9, 1e-12, "s", "−2.0000 ± 0.0010 ns"],
  ])("%d ± %d %s is %s", (value, u, unit, text) => {
    expect(formatFigure({ value, u }, unit)).toBe(text);
  });

  it("takes the prefix from an uncertainty that is larger than its value", () => {
    expect(formatFigure({ value: 0, u: 0.0021 }, "H")).toBe("0.0 ± 2.1 mH");
  });
});
