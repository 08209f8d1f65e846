/** The way in: bytes → captures. One road for files held whole and for files read piece by piece. */
import type { Capture } from "../capture.ts";
import { ReadingError } from "../errors.ts";
import type { Setup } from "../setup/schema.ts";
import { assemble } from "./assemble.ts";
import { parseBulk, type BulkPlan, type ParsedChunk } from "./bulk.ts";
import { splitCells } from "./cells.ts";
import { isCutLine } from "./cut-line.ts";
import { Columns } from "./columns.ts";
import { detectEncoding, utf16ToUtf8 } from "./encoding.ts";
import { planLayout, type Layout } from "./layout.ts";
import { splitLines } from "./lines.ts";
import { nulByte, refuseForeign } from "./refuse.ts";
import type { ByteSource, CancelSignal } from "./source.ts";
import { concatenate, TextStream } from "./text-stream.ts";

interface IngestOptions {
  /** Called with the share read so far, 0 … 1, after every piece. */
  progress?: (share: number) => void;
  signal?: CancelSignal;
  /** Parses pieces elsewhere (worker threads); without one they are parsed here. */
  parser?: ChunkParser;
  /** Text of a settings file that belongs to this one. */
  sidecar?: string | null;
}

/** Takes over the bytes it is given: they may be transferred to another thread. */
export interface ChunkParser {
  /** Pieces worth having under way at once. */
  lanes: number;
  parse(bytes: Uint8Array<ArrayBuffer>, plan: BulkPlan): Promise<ParsedChunk>;
  /** Memory of a piece that is done with. */
  spare?(): ArrayBuffer | undefined;
  /** Its values have been copied: their memory may be used again. */
  release?(chunk: ParsedChunk): void;
  /** No more pieces will come. */
  close?(): Promise<void>;
}

interface Ingested {
  captures: Capture[];
  /** The same for files of the same layout. */
  layout: string;
}

const headBytes = 256 * 1024;
const longestHead = 32 * 1024 * 1024;
/** One line of this length is no row of samples. */
const longestLine = 3 * 1024 * 1024;
const tailBytes = 8 * 1024;
const pieceBytes = 2 * 1024 * 1024;

/** For small files and tests: everything at once. Throws ReadingError. */
export function ingestBytes(bytes: Uint8Array, setup: Setup, _name?: string): Capture[] {
  const { encoding, mark } = detectEncoding(bytes);
  const text = encoding === "bytes" ? bytes.subarray(mark) : utf16ToUtf8(bytes.subarray(mark), encoding);
  let head = text.subarray(0, headBytes);
  while (head.length < text.length && isShort(head)) head = text.subarray(0, 4 * head.length);
  refuseForeign(head);
  const layout = planLayout(head, head.length === text.length, setup);
  const columns = new Columns(layout, likelyRows(layout, text.length));
  let from = layout.dataStart;
  for (let size = pieceBytes; from < text.length; size = pieceBytes) {
    let to = lastLineEnd(text, from, from + size);
    while (to === from && from + size < text.length) to = lastLineEnd(text, from, from + (size *= 2));
    if (to === from) break;
    columns.append(parseBulk(text.subarray(from, to), layout.plan), to - from);
    from = to;
  }
  const tail = text.subarray(Math.max(layout.dataStart, from - tailBytes), from);
  return finish(layout, columns, setup, { tail, unended: text.subarray(from) });
}

/** For files of any size: never more of them in memory than a few pieces. Throws ReadingError. */
export async function ingest(
  source: ByteSource,
  setup: Setup,
  options: IngestOptions = {},
): Promise<Ingested> {
  const stream = new TextStream(source);
  let head = await stream.next(headBytes);
  while (!stream.ended && isShort(head)) head = concatenate(head, await stream.next(3 * head.length));
  refuseForeign(head);
  const layout = planLayout(head, stream.ended, setup, options.sidecar ?? null);
  const columns = new Columns(layout, likelyRows(layout, source.size));
  const end = await readData(stream, head.subarray(layout.dataStart), layout, columns, options);
  // What the threads and their pieces take is given back before the channels are looked through.
  await options.parser?.close?.();
  return { captures: finish(layout, columns, setup, end), layout: layout.signature };
}

/** How the text ends: its last whole lines, and a last line without a line end. */
interface TextEnd {
  tail: Uint8Array;
  unended: Uint8Array;
}

async function readData(
  stream: TextStream,
  first: Uint8Array,
  { plan }: Layout,
  columns: Columns,
  options: IngestOptions,
): Promise<TextEnd> {
  const parser: ChunkParser = options.parser ?? {
    lanes: 1,
    parse: async (bytes, plan) => parseBulk(bytes, plan),
  };
  const underWay: { result: Promise<ParsedChunk>; bytes: number }[] = [];
  const settle = async () => {
    const { result, bytes } = underWay.shift()!;
    const chunk = await result;
    columns.append(chunk, bytes);
    parser.release?.(chunk);
  };
  let tail = new Uint8Array(0);
  let piece = concatenate(first, new Uint8Array(0));
  for (;;) {
    if (options.signal?.aborted) throw cancelled();
    const end = lastLineEnd(piece, 0, piece.length);
    const rest = piece.slice(end);
    if (end > 0) {
      const bytes = piece.subarray(0, end);
      tail = bytes.slice(Math.max(0, end - tailBytes));
      underWay.push({ result: parser.parse(bytes, plan), bytes: end });
      if (underWay.length > parser.lanes) await settle();
      options.progress?.(Math.min(1, stream.consumed / stream.size));
    }
    if (rest.length > longestHead) throw endlessLine();
    if (stream.ended) {
      while (underWay.length > 0) await settle();
      return { tail, unended: rest };
    }
    piece = concatenate(rest, await stream.next(pieceBytes), parser.spare?.());
  }
}

function finish(layout: Layout, columns: Columns, setup: Setup, { tail, unended }: TextEnd): Capture[] {
  const cellsOf = (bytes: Uint8Array) =>
    splitLines(bytes).map(({ text }) => splitCells(text, layout.dialect.separator));
  columns.tail = cellsOf(tail)
    .slice(-40)
    .filter(({ length }) => length >= layout.plan.width);
  const [last] = cellsOf(unended);
  if (last && isCutLine(last, columns.tail, layout.plan))
    columns.cutLine = last.join(layout.dialect.separator);
  else if (last) columns.append(parseBulk(unended, layout.plan), unended.length);
  if (columns.nul >= 0) throw nulByte(layout.dataStart + columns.nul);
  return assemble(layout, columns, setup);
}

/** Too few lines to see how a file is built: its lines are long. */
function isShort(head: Uint8Array): boolean {
  let ends = 0;
  for (let at = 0; at < head.length; at++) if (head[at] === 10 || head[at] === 13) ends++;
  if (ends === 0 && head.length > longestLine) throw endlessLine();
  return (ends < 64 || head.length > 2000 * ends) && head.length < longestHead;
}

/** Just behind the last line end between `from` and `to`; `from` where there is none. */
function lastLineEnd(bytes: Uint8Array, from: number, to: number): number {
  let at = Math.min(to, bytes.length);
  while (at > from && bytes[at - 1] !== 10 && bytes[at - 1] !== 13) at--;
  return at;
}

/** A little more than the file should hold, from the length of its first lines. */
function likelyRows(layout: Layout, size: number): number {
  const lines = layout.sample.length;
  const bytes = layout.sample.reduce(
    (sum, cells) => sum + cells.reduce((n, cell) => n + cell.length + 1, 0),
    0,
  );
  return Number.isFinite(size) ? Math.ceil((1.1 * size * lines) / Math.max(1, bytes)) + 16 : 1_000_000;
}

const cancelled = () =>
  new ReadingError("cancelled", "Reading was stopped", "Open the file again to read it");

const endlessLine = () =>
  new ReadingError(
    "endless-line",
    "The file is one line without an end",
    "Export the waveform with one row a sample",
  );
