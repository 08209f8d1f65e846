import { describe, expect, it } from "vitest";
import { parseEntry, parsePercent } from "../../renderer/format/entry.ts";
import { percent, stated } from "../../renderer/format/figure.ts";
import { countsSentence, timeLeft, verdictWord } from "../../renderer/format/words.ts";

describe("what people type into a field", () => {
  // SI prefixes: SI Brochure, 9th edition, table 7.
  it.each([
    ["330n", "F", 330e-9],
    ["330 nF", "F", 330e-9],
    ["0,33 µF", "F", 0.33e-6],
    ["0.33uF", "F", 0.33e-6],
    ["4.7 mH", "H", 4.7e-3],
    ["12", "V", 12],
    ["−40", "°C", -40],
    ["1.2e-4", "s", 1.2e-4],
    ["4.7 kΩ", "Ω", 4700],
    ["4.7 kohm", "Ω", 4700],
    ["100M", "V/s", 100e6],
    ["6m", "m", 6],
    ["6 mm", "m", 6e-3],
    [".5", "V", 0.5],
  ])("%s in %s", (text, unit, value) => expect(parseEntry(text, unit)).toBe(value));

  it.each(["", "abc", "12 apples", "1.2.3", "--4", "NaN", "Infinity"])("refuses %j", (text) =>
    expect(parseEntry(text, "V")).toBeNull(),
  );

  it("takes a tolerance in percent only between 0 and 100", () => {
    expect(parsePercent("5")).toBe(0.05);
    expect(parsePercent("5 %")).toBe(0.05);
    expect(parsePercent("-1")).toBeNull();
    expect(parsePercent("101")).toBeNull();
  });
});

describe("stated values", () => {
  it.each([
    [3.3e-7, "F", "330\u00a0nF"],
    [12, "V", "12\u00a0V"],
    [0.0125, "H", "12.5\u00a0mH"],
    [-5, "°C", "−5\u00a0°C"],
    [80, "", "80"],
    [100, "V", "100\u00a0V"],
    [null, "V", "–"],
  ])("%s %s", (value, unit, text) => expect(stated(value, unit)).toBe(text));

  it("come back from the field as they went in", () => {
    for (const value of [3.3e-7, 4.7e-3, 1e-10, 600, 0.05, 98_500, 2.5e-6])
      for (const unit of ["F", "V", "s"])
        expect(parseEntry(stated(value, unit).replace("\u00a0", " "), unit)).toBe(value);
  });
});

describe("sentences", () => {
  const counts = { pulses: 42, sparks: 33, quiet: 8, unclear: 1, misfires: 8 };
  const rate = { value: 8 / 41, low: 0.0858, high: 0.3681, level: 0.95 };

  it("give the counts and the rate with its interval", () => {
    expect(countsSentence({ ...counts, misfireRate: rate })).toBe(
      "42 pulses: 33 sparked, 8 misfired, 1 unclear. Misfire rate 19.5\u00a0% (8.6 to 36.8\u00a0% at 95\u00a0%).",
    );
  });

  it("call a quiet pulse a misfire only where a spark was expected", () => {
    expect(countsSentence({ ...counts, misfires: null, misfireRate: null })).toBe(
      "42 pulses: 33 sparked, 8 stayed quiet, 1 unclear.",
    );
    expect(verdictWord("no-spark", "spark")).toBe("misfire");
    expect(verdictWord("no-spark", null)).toBe("no spark");
    expect(verdictWord(null, null)).toBe("not judged");
  });

  it("say how long it takes in the unit one counts in", () => {
    expect([timeLeft(null), timeLeft(0.4), timeLeft(12.4), timeLeft(300)]).toEqual([
      "",
      "nearly there",
      "about 12 s left",
      "about 5 min left",
    ]);
    expect(percent(-0.05)).toBe("−5\u00a0%");
  });
});
