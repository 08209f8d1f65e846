import type { Figure, PulseReading } from "../../../analysis/reading-format.ts";
import type { CaptureDetail } from "../../bridge.ts";

type Cell = string | number | null;

const columns: [header: string, cell: (pulse: PulseReading, capture: CaptureDetail) => Cell][] = [
  ["file", (_, { file }) => file],
  ["record", (_, { reading }) => reading.record.index + 1],
  ["pulse", ({ index }) => index + 1],
  ["verdict", ({ spark }) => spark?.verdict ?? null],
  ["ruled", ({ ruled }) => ruled?.verdict ?? null],
  ["remark", ({ ruled }) => ruled?.remark ?? null],
  ["probability of a spark", ({ spark }) => spark?.probability ?? null],
  ["switch-off / s", ({ switchOffTime_s }) => switchOffTime_s],
  ["u(switch-off) / s", ({ u }) => u.switchOffTime_s ?? null],
  ["dwell / s", ({ dwell_s }) => dwell_s],
  ["peak / V", ({ peak_V }) => peak_V],
  ["u(peak) / V", ({ u }) => u.peak_V ?? null],
  ["peak at least / V", ({ peakAtLeast_V }) => peakAtLeast_V ?? null],
  ["margin to the switch's rating", ({ margin }) => margin],
  ...pair("frequency", "Hz", ({ ring }) => ring?.modes[0]?.frequency_Hz ?? null),
  ...pair("decay", "1/s", ({ ring }) => ring?.modes[0]?.decay_per_s ?? null),
  ...pair("Q", "", ({ ring }) => ring?.modes[0]?.q ?? null),
  ["ring quality", ({ ring }) => ring?.quality ?? null],
  ["ring reason", ({ ring }) => ring?.reason ?? null],
  ...pair("L", "H", ({ inductance_H }) => inductance_H),
  ...pair("C", "F", ({ capacitance_F }) => capacitance_F),
  ...pair("R", "Ω", ({ resistance_ohm }) => resistance_ohm),
  ["coil energy / J", ({ energy_J }) => energy_J.coil],
  ["spark energy / J", ({ energy_J }) => energy_J.spark],
  ["onset / s", ({ spark }) => spark?.onset_s ?? null],
  ["u(onset) / s", ({ u }) => u["spark.onset_s"] ?? null],
  ["extinction / s", ({ spark }) => spark?.extinction_s ?? null],
  ["breakdown / V", ({ spark }) => spark?.breakdown_V ?? null],
  ["breakdown from", ({ spark }) => spark?.breakdownFrom ?? null],
  ["judged against", ({ spark }) => spark?.judgedAgainst ?? null],
  ["reasons", ({ spark }) => spark?.reasons.join("; ") ?? null],
];

function pair(
  name: string,
  unit: string,
  figure: (pulse: PulseReading) => Figure,
): [string, (pulse: PulseReading) => Cell][] {
  const per = unit === "" ? "" : ` / ${unit}`;
  return [
    [`${name}${per}`, (pulse) => figure(pulse)?.value ?? null],
    [`u(${name})${per}`, (pulse) => figure(pulse)?.u ?? null],
  ];
}

/**
 * One row a pulse, units in the header, RFC 4180 with CRLF. Numbers have a decimal point whatever the
 * locale, a figure that could not be had is an empty cell. The byte order mark makes spreadsheets take
 * the text as UTF-8.
 */
export function pulseTable(captures: CaptureDetail[]): string {
  const rows: Cell[][] = [columns.map(([header]) => header)];
  for (const capture of captures)
    for (const pulse of capture.reading.pulses) rows.push(columns.map(([, cell]) => cell(pulse, capture)));
  return `\uFEFF${rows.map((row) => `${row.map(cellText).join(",")}\r\n`).join("")}`;
}

/**
 * Where a spreadsheet would begin a formula: at the cell's start, whatever blanks come first, and behind a
 * semicolon or tab, which others take for the cells' separator. Full-width signs count there as well.
 */
const formulaStart = /(?<=^|[;\t\r\n])(?=\s*[=+\-@＝＋－＠]|[\t\r])/g;

/** Text that a spreadsheet would take for a formula gets an apostrophe before it. */
function cellText(cell: Cell): string {
  if (cell === null) return "";
  if (typeof cell === "number") return String(cell);
  const safe = cell.replace(formulaStart, "'");
  return /[",;\t\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
