import { formatFigure, formatNumber } from "../../../analysis/format/figure.ts";
import type { BudgetLine, Figure, PulseReading } from "../../../analysis/reading-format.ts";
import type { CaptureDetail, RunDetail } from "../../bridge.ts";
import { statementWords } from "../../../analysis/setup/words.ts";
import type { Setup } from "../../../analysis/setup/schema.ts";
import { html, isolated, table, type Markup } from "./markup.ts";
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
  return html`${table(
      ["figure", "value ± standard uncertainty"],
      [
        ...rows.map(([name, figure, unit]) => [name, formatFigure(figure, unit)]),
        ["highest kick", highestKick(captures)],
      ],
    )}
    <p class="quiet">A dash is a figure that could not be had; the notes of its capture say why.</p>
    ${notes(captures)}`;
}

function highestKick(captures: CaptureDetail[]): string {
  const pulses = captures.flatMap(({ reading }) => reading.pulses);
  const most = Math.max(...pulses.map(({ peak_V, peakAtLeast_V }) => peak_V ?? peakAtLeast_V ?? -Infinity));
  const highest = pulses.find(({ peak_V, peakAtLeast_V }) => (peak_V ?? peakAtLeast_V) === most);
  if (!highest) return formatNumber(null, "V");
  if (highest.peak_V === null) return `over ${formatNumber(most, "V")}: the record is cut off there`;
  const u = highest.u.peak_V;
  return u === undefined ? formatNumber(most, "V") : formatFigure({ value: most, u }, "V");
}

const mostNotes = 30;

/** Each text once, with the files it is about where it is not about all of them. */
function notes(captures: CaptureDetail[]): Markup {
  const files = new Map<string, Set<string>>();
  for (const { file, reading } of captures)
    for (const { text } of reading.notes)
      files.set(text, (files.get(text) ?? new Set<string>()).add(baseName(file)));
  if (files.size === 0) return html``;
  const all = new Set(captures.map(({ file }) => baseName(file))).size;
  const left = files.size - mostNotes;
  return html`<ul>
    ${[...files]
      .slice(0, mostNotes)
      .map(
        ([text, about]) => html`<li>${about.size < all ? namesOf([...about]) : ""}${isolated(text)}</li>`,
      )}${left > 0 ? html`<li>and ${String(left)} more, in the book</li>` : html``}
  </ul>`;
}

/** "a.csv, b.csv and 7 more: " */
function namesOf(files: string[]): Markup {
  const named = files.slice(0, 2).map((file, i) => html`${i > 0 ? ", " : ""}${isolated(file)}`);
  return html`${named}${files.length > 2 ? ` and ${files.length - 2} more` : ""}: `;
}

const budgetWords: Record<string, [words: string, unit: string]> = {
  inductance_H: ["inductance", "H"],
  capacitance_F: ["capacitance", "F"],
  resistance_ohm: ["resistance", "Ω"],
  frequency_Hz: ["frequency", "Hz"],
};

/** What contributes how much, of the first pulse that has a budget. */
export function budgetTable(captures: CaptureDetail[]): Markup {
  const pulses = captures.flatMap(({ file, reading }) => reading.pulses.map((pulse) => ({ file, pulse })));
  const first = pulses.find(({ pulse }) => pulse.budget && Object.keys(pulse.budget).length > 0);
  if (!first) return html`<p class="quiet">No figure of this run has an uncertainty budget.</p>`;
  const lines = Object.entries(first.pulse.budget ?? {}).flatMap(([key, parts]: [string, BudgetLine[]]) => {
    const [words, unit] = budgetWords[key] ?? [key, ""];
    return parts.map(({ source, u }) => [words, source, formatNumber(u, unit, 2)]);
  });
  return html`<p class="quiet">
      Standard uncertainty that each source would give alone, for ${isolated(baseName(first.file))}, pulse
      ${first.pulse.index + 1}.
    </p>
    ${table(["figure", "source", "u"], lines)}`;
}

export function setupTable({ setup, origins }: RunDetail): Markup {
  const rows = (Object.keys(setup) as (keyof Setup)[]).flatMap((key) =>
    statementWords(key, setup).map(([what, value]) => [isolated(what), isolated(value), origins[key] ?? ""]),
  );
  if (rows.length === 0) return html`<p class="quiet">Nothing was stated.</p>`;
  return table(["stated", "value", "from"], rows);
}

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
          ${
            longName(file)
              ? html`<tr>
                  <td class="name" colspan="${logColumns.length}">${isolated(baseName(file))}</td>
                </tr>`
              : ""
          }
          <tr>
            <td>${longName(file) ? "" : isolated(baseName(file))}</td>
            ${logRow(pulse).map((cell) => html`<td>${cell}</td>`)}
          </tr>
          <tr>
            <td class="why" colspan="${logColumns.length}">${isolated(reasonsOf(pulse))}</td>
          </tr>
        </tbody>`,
    )}
  </table>`;
}

/** Too long for the log's first column: it has a row of its own. */
const longName = (file: string) => baseName(file).length > 18;

const reasonsOf = ({ ruled, spark }: PulseReading) =>
  [ruled?.remark, ...(spark?.reasons ?? [])].filter(Boolean).join("; ");

function logRow(pulse: PulseReading): string[] {
  const { ring, spark, ruled } = pulse;
  const mode = ring?.modes[0];
  const own = ruled ? `${ruled.verdict}, ruled ${ruled.at.slice(0, 10)}` : "";
  const verdict = [own, spark ? `${spark.verdict}` : "no verdict"].filter(Boolean).join("; program: ");
  const clipped = pulse.peakAtLeast_V === undefined ? null : `over ${formatNumber(pulse.peakAtLeast_V, "V")}`;
  return [
    String(pulse.index + 1),
    formatNumber(pulse.switchOffTime_s, "s", 6),
    pulse.peak_V === null && clipped ? clipped : formatNumber(pulse.peak_V, "V"),
    formatFigure(mode?.frequency_Hz ?? null, "Hz"),
    formatFigure(mode?.q ?? null, ""),
    verdict,
    spark ? spark.probability.toFixed(3) : "–",
  ];
}
