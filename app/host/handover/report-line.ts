import { coilFromCaptures } from "../../../analysis/coil/line.ts";
import { formatFigure, formatNumber } from "../../../analysis/format/figure.ts";
import type { CaptureDetail } from "../../bridge.ts";
import { baseName } from "./base-name.ts";
import { html, isolated, table, type Markup } from "./markup.ts";

/**
 * L and the winding's own capacitance from rings with several capacitors: 1/ω0² over C is a line.
 * @param captures of the run, with those of the coil's other runs where there are any
 */
export function capacitorLine(captures: CaptureDetail[]): Markup {
  const { addedCapacitor: line } = coilFromCaptures(
    captures.map(({ reading }) => reading),
    captures.map(({ setup }) => setup),
  );
  if (!line || line.inductance_H === null)
    return html`<p class="quiet">
      No line: ${line?.reason ?? "no capture has a quiet ring and a stated capacitor"}.
    </p>`;
  const runs = new Set(captures.map(({ run }) => run)).size;
  return html`<p>
      From ${line.points.length} captures${runs > 1 ? ` of the coil’s latest ${runs} runs` : ""}: inductance
      ${formatFigure(line.inductance_H, "H")}, self-capacitance ${formatFigure(line.selfCapacitance_F, "F")},
      series resistance ${formatFigure(line.seriesResistance_ohm, "Ω")}, parallel resistance
      ${formatFigure(line.parallelResistance_ohm, "Ω")}.
    </p>
    ${table(
      ["file", "capacitor", "1/ω₀²", "off the line by"],
      line.points.map(({ capture, capacitance_F, inverseSquare_s2, residual, flagged }) => [
        isolated(baseName(captures[capture].file)),
        formatNumber(capacitance_F, "F"),
        `${(inverseSquare_s2.value * 1e12).toPrecision(6)} µs²`,
        `${((residual / inverseSquare_s2.value) * 100).toFixed(3)} %${flagged ? ", does not fit" : ""}`,
      ]),
    )}`;
}
