import { formatFigure, formatNumber } from "../../analysis/format/figure.ts";
import { coilFromCaptures, type DwellGoal } from "../../analysis/coil/line.ts";
import type { CaptureReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { capturesOf } from "../host/handlers/coil.ts";
import type { Book } from "../host/book/index.ts";
import { withBook } from "./book-option.ts";
import { historyText } from "./history-text.ts";
import { readAll, statedSetup } from "./read-all.ts";
import { complain, readArguments, say, UsageError, withUsage } from "./usage.ts";

type Coil = ReturnType<typeof coilFromCaptures>;

/** What is known of a coil rests on these: one setup a reading. */
interface Measured {
  files: string[];
  readings: CaptureReading[];
  setups: Setup[];
}

/** ringbook coil PATH… | --coil NAME [--current A | --energy J] [--setup FILE] [--json] [--book FILE] */
export const run = (args: string[]) =>
  withUsage(async () => {
    const { values, positionals } = readArguments(args, {
      coil: { type: "string" },
      setup: { type: "string" },
      current: { type: "string" },
      energy: { type: "string" },
      json: { type: "boolean" },
      book: { type: "string" },
    });
    if ((positionals.length === 0) === (values.coil === undefined))
      throw new UsageError("coil wants the paths of its captures, or --coil NAME for one of the book");
    const goal = goalOf(values);
    const print = (measured: Measured, history?: ReturnType<Book["coilHistory"]>) => {
      const coil = coilFromCaptures(measured.readings, measured.setups, goal);
      if (values.json) say(JSON.stringify({ ...coil, ...(history && { history: history.rows }) }));
      else say([coilText(coil, measured.files), ...(history ? historyText(history) : [])].join("\n"));
    };
    if (values.coil !== undefined) return fromBook(values.coil, values.book, print);
    const { problems, files } = await readAll(positionals, await statedSetup(values.setup), null);
    for (const { file, text } of problems) complain(`${file}: ${text}`);
    const captures = files.flatMap((file) => file.readings.map((reading) => ({ ...file, reading })));
    if (captures.length > 0)
      print({
        files: captures.map(({ path }) => path),
        readings: captures.map(({ reading }) => reading),
        setups: captures.map(({ setup }) => setup),
      });
    return problems.length > 0 ? 1 : 0;
  });

/** The dwell table is for a current in ampere or an energy in joule. */
function goalOf({ current, energy }: { current?: string; energy?: string }): DwellGoal | null {
  if (current !== undefined && energy !== undefined)
    throw new UsageError("the dwell table is for --current or for --energy, not for both");
  const positive = (name: string, text: string) => {
    const value = Number(text);
    if (!(value > 0) || !Number.isFinite(value))
      throw new UsageError(`--${name} wants a positive number, not "${text}"`);
    return value;
  };
  if (current !== undefined) return { current_A: positive("current", current) };
  return energy === undefined ? null : { energy_J: positive("energy", energy) };
}

const fromBook = (
  coil: string,
  path: string | undefined,
  print: (measured: Measured, history: ReturnType<Book["coilHistory"]>) => void,
) =>
  withBook(path, async (book) => {
    const captures = capturesOf(book, coil);
    const history = book.coilHistory(coil);
    if (captures.length === 0)
      throw new UsageError(`the book ${book.path} has no captures of coil "${coil}"`);
    print(
      {
        files: captures.map(({ file }) => file),
        readings: captures.map(({ reading }) => reading),
        setups: captures.map(({ setup }) => setup),
      },
      history,
    );
    return 0;
  });

function coilText(coil: Coil, files: string[]): string {
  return [
    coil.coil ?? "Coil without a name",
    ...lineText(coil, files),
    ...rampText(coil),
    ...driveText(coil),
    ...dwellText(coil),
    ...coil.stress.flatMap(({ part, quantity, value, unit, share, reason }) =>
      value === null
        ? [`  ${part}, ${quantity}: – (${reason})`]
        : [`  ${part}, ${quantity}: ${formatFigure(value, unit)}${shareText(share)}`],
    ),
    ...coil.notes.map(({ text }) => `  ${text}`),
  ].join("\n");
}

/** Warnings start at 80 % of a stated rating. */
const shareText = (share: number | null) =>
  share === null ? "" : `, ${Math.round(share * 100)} % of its rating${share >= 0.8 ? " (WARNING)" : ""}`;

function lineText({ addedCapacitor: line }: Coil, files: string[]): string[] {
  if (!line || line.inductance_H === null) return [];
  return [
    `  added-capacitor line over ${line.points.length} captures: L ${formatFigure(line.inductance_H, "H")}` +
      `  self-capacitance ${formatFigure(line.selfCapacitance_F, "F")}` +
      `  Rs ${formatFigure(line.seriesResistance_ohm, "Ω")}  Rp ${formatFigure(line.parallelResistance_ohm, "Ω")}`,
    ...line.points.map(
      ({ capture, capacitance_F, inverseSquare_s2, residual, flagged }) =>
        `    ${files[capture]}  ${formatNumber(capacitance_F, "F")}  off the line by ${((residual / inverseSquare_s2.value) * 100).toFixed(3)} %${flagged ? "  DOES NOT FIT" : ""}`,
    ),
  ];
}

function rampText({ ramp }: Coil): string[] {
  if (!ramp) return [];
  return [
    `  ramp: L ${formatFigure(ramp.inductance_H, "H")}  R ${formatFigure(ramp.resistance_ohm, "Ω")}` +
      `  R at 20 °C ${formatFigure(ramp.resistance20_ohm, "Ω")}  saturates at ${formatFigure(ramp.saturationCurrent_A, "A")}`,
  ];
}

function driveText({ drive }: Coil): string[] {
  if (drive.smallest_F === null) return [`  smallest capacitor: – (${drive.reason})`];
  return [
    `  smallest capacitor for ${formatNumber(drive.rating_V, "V")} at ${formatFigure(drive.current_A, "A")}: ${formatFigure(drive.smallest_F, "F")}`,
  ];
}

const cell = (text: string) => text.padStart(18);

function dwellText({ dwell }: Coil): string[] {
  if (!dwell) return [];
  return [
    `  time to ${formatNumber(dwell.current_A, "A")}`,
    `    ${"".padEnd(8)}${dwell.temperatures_C.map((temperature) => cell(`${temperature} °C`)).join("")}`,
    ...dwell.supplies_V.map(
      (supply, i) =>
        `    ${formatNumber(supply, "V").padEnd(8)}${dwell.time_s[i].map((time) => cell(formatFigure(time, "s"))).join("")}`,
    ),
  ];
}
