import { compareRuns } from "../../analysis/coil/compare.ts";
import { countSentence } from "../../analysis/format/counts.ts";
import { formatFigure } from "../../analysis/format/figure.ts";
import type { Figure } from "../../analysis/reading-format.ts";
import type { RunDetail } from "../bridge.ts";

/** Two runs side by side for people, the difference in the last column. */
export function compareText(first: RunDetail, second: RunDetail): string {
  const { quietRate, ...figures } = compareRuns(first, second);
  const row = (name: string, unit: string, key: "inductance_H" | "resistance_ohm" | "q") =>
    [
      name,
      ...[first.combined[key], second.combined[key], figures[key]].map((figure: Figure) =>
        formatFigure(figure, unit),
      ),
    ]
      .map((cell) => cell.padEnd(22))
      .join("");
  const percent = (share: number) => (share * 100).toFixed(1);
  return [
    `${first.name}: ${countSentence(first.counts)}`,
    `${second.name}: ${countSentence(second.counts)}`,
    ["", first.name, second.name, "difference"].map((cell) => cell.slice(0, 20).padEnd(22)).join(""),
    row("L", "H", "inductance_H"),
    row("R", "Ω", "resistance_ohm"),
    row("Q", "", "q"),
    quietRate
      ? `quiet pulses: ${percent(quietRate.value)} points more (${percent(quietRate.low)} to ${percent(quietRate.high)} at ${quietRate.level * 100} %)`
      : "quiet pulses: no judged pulses to compare",
  ].join("\n");
}
