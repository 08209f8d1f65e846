/** Damaged shapes end in a capture that agrees with an independent parse (PapaParse), or in a named error. */
import Papa from "papaparse";
import type { Capture, Channel } from "../../analysis/capture.ts";
import { ReadingError } from "../../analysis/errors.ts";
import { ingestBytes } from "../../analysis/ingest/index.ts";
import { seeded } from "../reference/random.ts";
import { mutate } from "./mutate.ts";
import { shapes } from "./shapes/index.ts";
import type { ShapeFile } from "./shapes/shape.ts";

const slowest_ms = 2000;
/** Shapes whose cells are not one channel's column each are tried for crashes only. */
const notByColumn =
  /utf16|envelope-pairs|trace-per-row|comma-comma|thousands|symbols|\.dat$|wide-shots|own-axes|n-grouped|n-quoted|n-minus|n-upright|n-envelope/;
/** Notes that own up to samples left out or added. */
const owned =
  /unreadable|short|long|cut|missing|skipped|overrange|mended|damaged|fewer|ambiguous|uneven|dropped|column|records/;

export interface Tally {
  read: number;
  refused: Record<string, number>;
  faults: string[];
}

export function fuzz(count: number, firstSeed: number): Tally {
  const tally: Tally = { read: 0, refused: {}, faults: [] };
  for (let seed = firstSeed; seed < firstSeed + count; seed++) {
    const random = seeded(seed);
    const shape = random.pick(shapes);
    const { bytes, how } = mutate(shape.bytes, random);
    const fault = tryOne(shape, bytes, tally);
    if (fault) tally.faults.push(`seed ${seed} ${shape.file} ${how.join("+")}: ${fault}`);
  }
  return tally;
}

export function tryOne(shape: ShapeFile, bytes: Uint8Array, tally: Tally): string | null {
  const start = performance.now();
  let captures: Capture[];
  try {
    captures = ingestBytes(bytes, shape.setup ?? {});
  } catch (error) {
    if (!(error instanceof ReadingError)) return `crashed: ${(error as Error).stack}`;
    tally.refused[error.code] = (tally.refused[error.code] ?? 0) + 1;
    return null;
  }
  tally.read++;
  const took_ms = performance.now() - start;
  if (took_ms > slowest_ms) return `took ${took_ms} ms`;
  return (
    wrongInterval(shape, captures) ??
    (notByColumn.test(shape.file) ? null : disagreement(shape, bytes, captures))
  );
}

/** Where times stand in a column, damage must not move the interval without a word. */
function wrongInterval(shape: ShapeFile, captures: Capture[]): string | null {
  const expected = shape.records[0]?.step_s;
  if (!expected || !/^(p-|n-|s01|s02|s12|s14)/.test(shape.file) || shape.setup) return null;
  const wrong = captures.find(({ timebase, notes }) => {
    const error = Math.abs((timebase.step_s ?? expected) / expected - 1);
    return error > 0.05 && !notes.some(({ code }) => owned.test(code) || /^(time|interval)-/.test(code));
  });
  return wrong ? `interval ${wrong.timebase.step_s} s instead of ${expected} s` : null;
}

function disagreement(shape: ShapeFile, bytes: Uint8Array, captures: Capture[]): string | null {
  const text = textOf(bytes);
  // A stray quote makes two files of one: cells may be quoted, or the quotes are what was added.
  const columns = /quoted/.test(shape.file)
    ? [...numericColumns(shape, text, '"'), ...numericColumns(shape, text.replaceAll('"', ""), "\0")]
    : numericColumns(shape, text, "\0");
  const noted = captures.some(({ notes }) => notes.some(({ code }) => owned.test(code)));
  for (const position of new Set(
    captures.flatMap(({ channels }) => channels.map((channel) => channel.position)),
  )) {
    const parts = captures.flatMap(({ channels }) =>
      channels.filter((channel) => channel.position === position),
    );
    const candidates = columns.map((column) => compare(parts, column, noted));
    if (!candidates.includes(null)) return `channel ${parts[0].name}: ${candidates.join(" | ")}`;
  }
  return null;
}

/** null where a column of the file and the channel agree in count and extremes. */
function compare(parts: Channel[], column: number[], noted: boolean): string | null {
  const prefix = { m: 1e-3, k: 1e3 }[parts[0].fileUnit?.replace(/^V$|^A$/, "")[0] ?? ""] ?? 1;
  const scale = parts[0].scale * prefix;
  const expected = column.map((value) => value * scale).toSorted((a, b) => a - b);
  const finite = parts
    .flatMap(({ samples }) => [...samples].filter(Number.isFinite))
    .toSorted((a, b) => a - b);
  const allowed = 4 + (noted ? 0.12 * expected.length + 20 : 0);
  if (Math.abs(finite.length - expected.length) > allowed)
    return `${finite.length} samples of ${expected.length}`;
  const beyond = (value: number) => value < finite[0] - 1e-9 || value > finite[finite.length - 1] + 1e-9;
  const outside = expected.filter(beyond).length;
  if (outside > allowed) return `${outside} beyond ${finite[0]}…${finite[finite.length - 1]}`;
  const known = new Set(expected.map((value) => value.toPrecision(9)));
  const invented = [finite[0], finite[finite.length - 1]].filter((value) => !known.has(value.toPrecision(9)));
  return invented.length > 0 ? `${invented.join()} is not in the file` : null;
}

const textOf = (bytes: Uint8Array) =>
  Buffer.from(bytes)
    .toString("latin1")
    .replaceAll("\r\r\n", "\n")
    .replaceAll("\r\n", "\n")
    .replaceAll("\r", "\n");

/** Every column of the file as PapaParse sees it, numbers alone, the header's rows left out. */
function numericColumns(shape: ShapeFile, text: string, quoteChar: string): number[][] {
  const comma = /decimal-comma/.test(shape.file);
  const { data } = Papa.parse<string[]>(text, {
    delimiter: shape.file.endsWith(".txt") ? "\t" : comma || /s12|single-byte/.test(shape.file) ? ";" : ",",
    skipEmptyLines: "greedy",
    quoteChar,
  });
  const width = Math.max(...data.map((cells) => cells.length));
  const number = (cell: string | undefined) => {
    const spelled = (cell ?? "").trim();
    return spelled === "" ? NaN : Number(comma ? spelled.replace(",", ".") : spelled);
  };
  return Array.from({ length: Math.min(width, 40) }, (_, column) =>
    data.map((cells) => number(cells[column])).filter(Number.isFinite),
  );
}
