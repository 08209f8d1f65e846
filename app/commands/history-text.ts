import { rateText } from "../../analysis/format/counts.ts";
import { formatFigure, noFigure } from "../../analysis/format/figure.ts";
import type { Book } from "../host/book/index.ts";

/** A coil from run to run for people: a line each, under it what departs; then what drifts. */
export function historyText({ rows, drifts }: ReturnType<Book["coilHistory"]>): string[] {
  const width = Math.max(...rows.map(({ name }) => name.length));
  return [
    "  its runs, the earliest first",
    ...rows.flatMap(({ name, taken, inductance_H, q, resistance20_ohm, misfireRate, flag }) => [
      [
        `    ${(taken ?? "").slice(0, 10).padEnd(10)}`,
        name.padEnd(width),
        `L ${formatFigure(inductance_H, "H")}`,
        `Q ${formatFigure(q, "")}`,
        `R at 20 °C ${formatFigure(resistance20_ohm, "Ω")}`,
        `misfires ${misfireRate ? rateText(misfireRate) : noFigure}`,
      ].join("  "),
      ...(flag ? [`      ! ${flag}`] : []),
    ]),
    ...drifts.map((text) => `  ${text}`),
  ];
}
