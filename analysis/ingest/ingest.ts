/** The way in: bytes → captures. One road for files held whole and for files read piece by piece. */
import type { Capture } from "../capture.ts";
import { ReadingError } from "../errors.ts";
import { atOnce, type Steps } from "../steps.ts";
import type { Setup } from "../setup/schema.ts";
import { assemble } from "./assemble.ts";
import { parseBulk, type BulkPlan, type ParsedChunk } from "./bulk.ts";
import { splitCells } from "./cells.ts";
import { isCutLine } from "./cut-line.ts";
import { Columns } from "./columns.ts";
import { detectEncoding, utf16ToUtf8 } from "./encoding.ts";
import { planLayout, type Layout } from "./layout.ts";
import { splitLines } from "./lines.ts";
import { PieceMemory } from "./memory.ts";
import { nulByte, refuseForeign } from "./refuse.ts";
import type { ByteSource, CancelSignal } from "./source.ts";
import { concatenate, TextStream } from "./text-stream.ts";

interface IngestOptions {
  /** Called with the share read so far, 0 … 1, after every piece and between the steps of other work. */
  progress?: (share: number) => void;
  /** Waited for between these steps, so that a signal can arrive. */
  rest?: () => Promise<void>;
  signal?: CancelSignal;
  /** Parses pieces elsewhere (worker threads); without one they are parsed here. */
  parser?: ChunkParser;
  /** Text of a settings file that belongs to this one. */
  sidecar?: string | null;
}

export interface ChunkParser {
  /** Pieces worth having under way at once. */
  lanes: number;
  /** Memory for a piece's text. */
  room(bytes: number): ArrayBufferLike;
  /** Takes `text`, which lies at the beginning of such memory, until it is released. */
  parse(text: Uint8Array, plan: BulkPlan): Promise<ParsedChunk> | ParsedChunk;
  /** The values have been copied: what the piece took may be used again. */
  release(text: Uint8Array, chunk: ParsedChunk): void;
  /** No more pieces will come. */
  close?(): Promise<void>;
}

/** Parses where it stands. */
function parserInPlace(): ChunkParser {
  const memory = new PieceMemory(ArrayBuffer);
  return {
    lanes: 0,
    room: (bytes) => memory.text(bytes),
    parse: (text, plan) => parseBulk(text, plan, memory.values(text.length, plan)),
    release(text, chunk) {
      memory.releaseText(text);
      memory.releaseValues(chunk);
    },
  };
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
  const layout = atOnce(planLayout(head, head.length === text.length, setup));
  const columns = new Columns(layout, likelyRowsOf(layout, text.length));
  const memory = new PieceMemory(ArrayBuffer);
  let from = layout.dataStart;
  for (let size = pieceBytes; from < text.length; size = pieceBytes) {
    let to = lastLineEnd(text, from, from + size);
    while (to === from && from + size < text.length) to = lastLineEnd(text, from, from + (size *= 2));
    if (to === from) break;
    const chunk = parseBulk(text.subarray(from, to), layout.plan, memory.values(to - from, layout.plan));
    columns.append(chunk, to - from);
    memory.releaseValues(chunk);
    from = to;
  }
  const tail = text.subarray(Math.max(layout.dataStart, from - tailBytes), from);
  return atOnce(finish(layout, columns, setup, { tail, unended: text.subarray(from) }));
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
  const share = () => Math.min(1, stream.consumed / stream.size);
  const layout = await inTurn(planLayout(head, stream.ended, setup, options.sidecar ?? null), share, options);
  const columns = new Columns(layout, likelyRowsOf(layout, source.size));
  const end = await readData(stream, head.subarray(layout.dataStart), layout, columns, options);
  // What the threads and their pieces take is given back before the channels are looked through.
  await options.parser?.close?.();
  const captures = await inTurn(finish(layout, columns, setup, end), share, options);
  return { captures, layout: layout.signature };
}

/** Between two steps it is said how it goes, and it can be stopped. */
async function inTurn<T>(
  steps: Steps<T>,
  share: () => number,
  { progress, rest, signal }: IngestOptions,
): Promise<T> {
  for (;;) {
    const { done, value } = steps.next();
    if (done) return value;
    progress?.(share());
    await rest?.();
    if (signal?.aborted) throw cancelled();
  }
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
  const parser = options.parser ?? parserInPlace();
  const underWay: { chunk: Promise<ParsedChunk> | ParsedChunk; text: Uint8Array }[] = [];
  const settle = async () => {
    const { chunk, text } = underWay.shift()!;
    const parsed = await chunk;
    columns.append(parsed, text.length);
    parser.release(text, parsed);
  };
  let tail = new Uint8Array(0);
  let piece = concatenate(first, new Uint8Array(0), parser.room(first.length));
  for (;;) {
    if (options.signal?.aborted) throw cancelled();
    const end = lastLineEnd(piece, 0, piece.length);
    const rest = piece.slice(end);
    if (end > 0) {
      const text = piece.subarray(0, end);
      tail = text.slice(Math.max(0, end - tailBytes));
      underWay.push({ chunk: parser.parse(text, plan), text });
      if (underWay.length > parser.lanes) await settle();
      options.progress?.(Math.min(1, stream.consumed / stream.size));
    }
    if (rest.length > longestHead) throw endlessLine();
    if (stream.ended) {
      while (underWay.length > 0) await settle();
      return { tail, unended: rest };
    }
    const next = await stream.next(pieceBytes);
    piece = concatenate(rest, next, parser.room(rest.length + next.length));
  }
}

function* finish(
  layout: Layout,
  columns: Columns,
  setup: Setup,
  { tail, unended }: TextEnd,
): Steps<Capture[]> {
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
  return yield* assemble(layout, columns, setup);
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
function likelyRowsOf(layout: Layout, size: number): number {
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
