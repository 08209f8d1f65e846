/** How a file is built, found from its first part alone; what the bulk parser and the assembly work by. */
import { ReadingError } from "../errors.ts";
import type { Note } from "../capture.ts";
import type { Setup } from "../setup/schema.ts";
import type { Steps } from "../steps.ts";
import { countsBesideTime, findAxes, type Axes, type HeadColumn } from "./axes.ts";
import { findBlock, type Block } from "./block.ts";
import { parseBulk, type BulkPlan } from "./bulk.ts";
import type { RawChannel } from "./channel.ts";
import { chooseDialect, type Dialect, type DialectChoice } from "./dialect.ts";
import { commaNote, isCommaAmbiguous } from "./decimal-comma.ts";
import { joinDecimalCommas } from "./join-commas.ts";
import { readHeader, sidecarSettings, type Header } from "./header.ts";
import { splitLines, type Line } from "./lines.ts";
import { nameColumns } from "./names.ts";
import { refuseSpectrum } from "./spectrum.ts";
import { isTransposed, refuseTooWide, rowChannels } from "./transposed.ts";
import { statedTiming, timingColumns, type StatedTiming } from "./timing.ts";
import type { NamedUnit } from "./units.ts";
import { signatureOf } from "./signature.ts";

export interface Layout {
  dialect: Dialect;
  block: Block;
  header: Header;
  timing: StatedTiming;
  axes: Axes;
  /** By column of the file. */
  names: Map<number, NamedUnit>;
  plan: BulkPlan;
  /** First byte of the data, in the text after its byte order mark. */
  dataStart: number;
  /** Line number of the first data line. */
  dataLine: number;
  /** Axis cells of the first data lines as they are written, by column. */
  axisText: Map<number, string[]>;
  /** First data lines, for what hangs on spelling. */
  sample: string[][];
  signature: string;
  /** One trace a row: read already, there is no bulk. */
  traces: RawChannel[] | null;
  /** What had to be left open to go on. */
  notes: Note[];
}

const sniffedLines = 1500;

/** `complete`: the head is the whole file, so its last line is not cut. `sidecar`: settings from another file. */
export function* planLayout(
  head: Uint8Array,
  complete: boolean,
  setup: Setup,
  sidecar: string | null = null,
): Steps<Layout> {
  const parts = yield* sniff(head, complete, setup);
  yield;
  if (sidecar !== null) parts.header.settings.push(...sidecarSettings(sidecar));
  const ambiguous = isCommaAmbiguous(parts);
  if (!ambiguous || setup.decimalMark === ".") return describeLayout(parts, false);
  if (setup.decimalMark !== ",") return describeLayout(parts, true);
  const layout = describeLayout(yield* sniff(joinDecimalCommas(head), complete, setup), false);
  return { ...layout, plan: { ...layout.plan, joinCommas: true } };
}

function* sniff(head: Uint8Array, complete: boolean, setup: Setup): Steps<Sniffed> {
  let lines = splitLines(head, sniffedLines + 1);
  if (!complete || lines.length > sniffedLines) lines = lines.slice(0, -1);
  const texts = lines.map(({ text }) => text);
  const choice = chooseDialect(texts, setup.decimalMark ?? null);
  if (!choice) throw noNumbers(lines);
  yield;
  const block = findBlock(choice);
  const header = readHeader(lines, choice.rows, block, choice.dialect.separator);
  const sample = choice.rows.slice(block.from, block.to).map(({ cells }) => cells);
  return { head, lines, choice, block, header, sample };
}

/** What the text itself shows, before anything is concluded from it. */
export interface Sniffed {
  head: Uint8Array;
  lines: Line[];
  choice: DialectChoice;
  block: Block;
  header: Header;
  /** First data lines, by cells. */
  sample: string[][];
}

function describeLayout(sniffed: Sniffed, ambiguous: boolean): Layout {
  const { head, lines, choice, block, header, sample } = sniffed;
  const { dialect, rows } = choice;
  const timing = statedTiming(header);
  const plan = planBulk(dialect, block, true);
  const dataStart = lines[block.from].start;
  const dataEnd = lines[block.to]?.start ?? head.length;
  const first = parseBulk(head.subarray(dataStart, dataEnd), plan);
  if (first.rows < 2) throw tooFewRows(lines[block.from].number);
  const heads = block.numeric.map((column) => first.values[plan.columns.indexOf(column)]);
  const names = nameColumns(header, block, countsBesideTime(heads));
  const columns = block.numeric.map((column, i): HeadColumn => ({
    column,
    head: heads[i],
    name: names.get(column) ?? { name: "", spelled: null, unit: null },
  }));
  const transposed = isTransposed(block, block.to - block.from);
  if (!transposed) refuseTooWide(block, lines[block.from].number);
  const axes =
    ambiguous || transposed
      ? { groups: [{ axis: null, values: plan.columns }], counter: null, counterFrom: 0 }
      : findAxes(columns, block.symbolic, timingColumns(header).length > 0);
  refuseSpectrum(axes, names, timing);
  const axisText = new Map(
    axes.groups.flatMap(({ axis }) =>
      axis === null ? [] : [[axis, sample.map((cells) => cells[axis] ?? "")]],
    ),
  );
  return {
    dialect,
    block,
    header,
    timing,
    axes,
    names,
    plan: planBulk(dialect, block, axes.groups[0].axis === null),
    dataStart,
    dataLine: lines[block.from].number,
    axisText,
    sample,
    signature: signatureOf(dialect, header, axes, names),
    traces: transposed ? rowChannels(rows.slice(block.from, block.to), block, dialect.format) : null,
    notes: ambiguous ? [commaNote()] : [],
  };
}

function planBulk({ separator, format }: Dialect, block: Block, keepEmptyRows: boolean): BulkPlan {
  const columns = [...block.numeric, ...block.symbolic].toSorted((a, b) => a - b);
  return {
    separator: separator.charCodeAt(0),
    format,
    width: columns[columns.length - 1] + 1,
    cells: Math.max(block.width, columns[columns.length - 1] + 1),
    filled: block.filled,
    columns,
    symbols: block.symbolic,
    keepEmptyRows,
    joinCommas: false,
  };
}

function noNumbers(lines: Line[]): ReadingError {
  const filled = lines.find(({ text }) => text.trim() !== "");
  return new ReadingError(
    "no-numbers",
    `No line of the file holds a number (its first line is "${(filled?.text ?? "").trim().slice(0, 60)}")`,
    "Save the waveform's samples as text (CSV) on the oscilloscope",
    { line: filled?.number ?? 1 },
  );
}

function tooFewRows(line: number): ReadingError {
  return new ReadingError(
    "too-few-rows",
    `There is only one row of numbers, at line ${line}`,
    "A capture needs at least two samples; save the waveform itself, not a single measurement",
    { line },
  );
}
