import { formatFigure, formatNumber } from "../../../analysis/format/figure.ts";
import type { BudgetLine, Figure, PulseReading } from "../../../analysis/reading-format.ts";
import type { CaptureDetail, RunDetail } from "../../bridge.ts";
import { html, table, type Markup } from "./markup.ts";
import { baseName } from "./base-name.ts";

/** The run's combined figures, and the ramp's of the first capture that has one. */
export function figureTable({ combined }: RunDetail, captures: CaptureDetail[]): Markup {
  const ramp = captures.find(({ reading }) => reading.ramp)?.reading.ramp;
  const rows: [string, Figure, string][] = [
    ["inductance from the ring", combined.inductance_H, "H"],
    ["capacitance", combined.capacitance_F, "F"],
    ["resistance, the ring's series equivalent", combined.resistance_ohm, "Ω"],
    ["quality factor", combined.q, ""],
    ["inductance from the ramp", ramp?.inductance_H ?? null, "H"],
    ["resistance of the loop, from the ramp", ramp?.resistance_ohm ?? null, "Ω"],
    ["winding resistance at 20 °C", ramp?.resistance20_ohm ?? null, "Ω"],
    ["current at switch-off", ramp?.finalCurrent_A ?? null, "A"],
    ["saturation current", ramp?.saturationCurrent_A ?? null, "A"],
  ];
  const peaks = captures.flatMap(({ reading }) => reading.pulses.flatMap(({ peak_V }) => peak_V ?? []));
  const highest = peaks.length === 0 ? null : Math.max(...peaks);
  return html`${table(
      ["figure", "value ± standard uncertainty"],
      [
        ...rows.map(([name, figure, unit]) => [name, formatFigure(figure, unit)]),
        ["highest kick", formatNumber(highest, "V")],
      ],
    )}
    <p class="quiet">A dash is a figure that could not be had; the notes of its capture say why.</p>
    ${notes(captures)}`;
}

function notes(captures: CaptureDetail[]): Markup {
  const texts = new Set(captures.flatMap(({ reading }) => reading.notes.map(({ text }) => text)));
  if (texts.size === 0) return html``;
  return html`<ul>
    ${[...texts].slice(0, 30).map((text) => html`<li>${text}</li>`)}
  </ul>`;
}

const budgetUnits: Record<string, string> = {
  inductance_H: "H",
  capacitance_F: "F",
  resistance_ohm: "Ω",
  frequency_Hz: "Hz",
};

/** What contributes how much, of the first pulse that has a budget. */
export function budgetTable(captures: CaptureDetail[]): Markup {
  const pulses = captures.flatMap(({ file, reading }) => reading.pulses.map((pulse) => ({ file, pulse })));
  const first = pulses.find(({ pulse }) => pulse.budget && Object.keys(pulse.budget).length > 0);
  if (!first) return html`<p class="quiet">No figure of this run has an uncertainty budget.</p>`;
  const lines = Object.entries(first.pulse.budget ?? {}).flatMap(([figure, parts]: [string, BudgetLine[]]) =>
    parts.map(({ source, u }) => [figure, source, formatNumber(u, budgetUnits[figure] ?? "", 2)]),
  );
  return html`<p class="quiet">
      Standard uncertainty that each source would give alone, for ${baseName(first.file)}, pulse
      ${first.pulse.index + 1}.
    </p>
    ${table(["figure", "source", "u"], lines)}`;
}

export function setupTable({ setup, origins }: RunDetail): Markup {
  const rows = Object.entries(setup)
    .filter(([key]) => key !== "format")
    .map(([key, value]) => [key, stated(value), origins[key] ?? ""]);
  if (rows.length === 0) return html`<p class="quiet">Nothing was stated.</p>`;
  return table(["field", "value", "from"], rows);
}

const stated = (value: unknown) => (typeof value === "string" ? value : JSON.stringify(value));

const logColumns = ["file", "pulse", "switch-off", "kick", "ring", "Q", "verdict", "probability"];

/** Two rows a pulse: its figures, and under them why. */
export function pulseLog(captures: CaptureDetail[]): Markup {
  const pulses = captures.flatMap(({ file, reading }) => reading.pulses.map((pulse) => ({ file, pulse })));
  return html`<table class="log">
    <thead>
      <tr>
        ${logColumns.map((name) => html`<th>${name}</th>`)}
      </tr>
    </thead>
    ${pulses.map(
      ({ file, pulse }) =>
        html`<tbody>
          <tr>
            ${logRow(file, pulse).map((cell) => html`<td>${cell}</td>`)}
          </tr>
          <tr>
            <td class="why" colspan="${logColumns.length}">${reasonsOf(pulse)}</td>
          </tr>
        </tbody>`,
    )}
  </table>`;
}

const reasonsOf = ({ ruled, spark }: PulseReading) =>
  [ruled?.remark, ...(spark?.reasons ?? [])].filter(Boolean).join("; ");

function logRow(file: string, pulse: PulseReading): string[] {
  const { ring, spark, ruled } = pulse;
  const mode = ring?.modes[0];
  const own = ruled ? `${ruled.verdict}, ruled ${ruled.at.slice(0, 10)}` : "";
  const verdict = [own, spark ? `${spark.verdict}` : "no verdict"].filter(Boolean).join("; program: ");
  const clipped = pulse.peakAtLeast_V === undefined ? null : `over ${formatNumber(pulse.peakAtLeast_V, "V")}`;
  return [
    baseName(file),
    String(pulse.index + 1),
    formatNumber(pulse.switchOffTime_s, "s", 6),
    pulse.peak_V === null && clipped ? clipped : formatNumber(pulse.peak_V, "V"),
    formatFigure(mode?.frequency_Hz ?? null, "Hz"),
    formatFigure(mode?.q ?? null, ""),
    verdict,
    spark ? spark.probability.toFixed(3) : "–",
  ];
}
