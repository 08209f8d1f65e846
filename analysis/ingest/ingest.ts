/** The way in: bytes → captures. One road for files held whole and for files read piece by piece. */
import type { Capture } from "../capture.ts";
import { ReadingError } from "../errors.ts";
import type { Setup } from "../setup/schema.ts";
import { assemble } from "./assemble.ts";
import { parseBulk, type BulkPlan, type ParsedChunk } from "./bulk.ts";
import { splitCells } from "./cells.ts";
import { Columns } from "./columns.ts";
import { detectEncoding, utf16ToUtf8 } from "./encoding.ts";
import { planLayout, type Layout } from "./layout.ts";
import { splitLines } from "./lines.ts";
import { nulByte, refuseForeign } from "./refuse.ts";
import type { ByteSource, CancelSignal } from "./source.ts";
import { TextStream } from "./text-stream.ts";

export interface IngestOptions {
  /** Called with the share read so far, 0 … 1, after every piece. */
  progress?: (share: number) => void;
  signal?: CancelSignal;
  /** Parses pieces elsewhere (worker threads); without one they are parsed here. */
  parser?: ChunkParser;
}

/** Takes over the bytes it is given: they may be transferred to another thread. */
export interface ChunkParser {
  /** Pieces worth having under way at once. */
  lanes: number;
  parse(bytes: Uint8Array<ArrayBuffer>, plan: BulkPlan): Promise<ParsedChunk>;
}

export interface Ingested {
  captures: Capture[];
  /** The same for files of the same layout. */
  layout: string;
}

const headBytes = 512 * 1024;
const longestHead = 32 * 1024 * 1024;
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
  while (from < text.length) {
    const to = endOfPiece(text, Math.min(text.length, from + pieceBytes), from);
    columns.append(parseBulk(text.subarray(from, to), layout.plan), to - from);
    from = to;
  }
  return finish(layout, columns, setup, text.subarray(Math.max(layout.dataStart, text.length - 4096)));
}

/** For files of any size: never more of them in memory than a few pieces. Throws ReadingError. */
export async function ingest(
  source: ByteSource,
  setup: Setup,
  options: IngestOptions = {},
): Promise<Ingested> {
  const stream = new TextStream(source);
  let head = await stream.next(headBytes);
  while (!stream.ended && isShort(head)) head = joined(head, await stream.next(3 * head.length));
  refuseForeign(head);
  const layout = planLayout(head, stream.ended, setup);
  const columns = new Columns(layout, likelyRows(layout, source.size));
  const tail = await readData(stream, head.subarray(layout.dataStart), layout, columns, options);
  return { captures: finish(layout, columns, setup, tail), layout: layout.signature };
}

async function readData(
  stream: TextStream,
  first: Uint8Array,
  { plan }: Layout,
  columns: Columns,
  options: IngestOptions,
): Promise<Uint8Array> {
  const parser = options.parser ?? { lanes: 1, parse: async (bytes, plan) => parseBulk(bytes, plan) };
  const underWay: { result: Promise<ParsedChunk>; bytes: number }[] = [];
  const settle = async () => {
    const { result, bytes } = underWay.shift()!;
    columns.append(await result, bytes);
  };
  let rest = first;
  let tail = new Uint8Array(0);
  while (!stream.ended || rest.length > 0) {
    if (options.signal?.aborted) throw cancelled();
    const piece = joined(rest, stream.ended ? new Uint8Array(0) : await stream.next(pieceBytes));
    const end = stream.ended ? piece.length : endOfPiece(piece, piece.length, 0);
    rest = piece.slice(end);
    if (end === piece.length && !stream.ended && rest.length === 0 && !endsLine(piece)) {
      rest = piece;
      if (rest.length > 64 * pieceBytes) throw endlessLine();
      continue;
    }
    const bytes = piece.subarray(0, end);
    if (bytes.length > 0) tail = bytes.slice(Math.max(0, bytes.length - 4096));
    underWay.push({ result: parser.parse(bytes, plan), bytes: end });
    if (underWay.length > parser.lanes) await settle();
    options.progress?.(Math.min(1, stream.consumed / stream.size));
    if (options.signal?.aborted) throw cancelled();
  }
  while (underWay.length > 0) await settle();
  return tail;
}

function finish(layout: Layout, columns: Columns, setup: Setup, tail: Uint8Array): Capture[] {
  if (columns.nul >= 0) throw nulByte(layout.dataStart + columns.nul);
  columns.tail = splitLines(tail)
    .map(({ text }) => splitCells(text, layout.dialect.separator))
    .filter(({ length }) => length >= layout.plan.width)
    .slice(-40);
  return assemble(layout, columns, setup);
}

/** Too few lines to see how a file is built: its lines are long. */
function isShort(head: Uint8Array): boolean {
  let ends = 0;
  for (let at = 0; at < head.length && ends < 64; at++) if (head[at] === 10 || head[at] === 13) ends++;
  if (ends === 0 && head.length >= longestHead) throw endlessLine();
  return ends < 64 && head.length < longestHead;
}

/** Just behind the last line end before `limit`; `limit` itself where there is none or at the text's end. */
function endOfPiece(bytes: Uint8Array, limit: number, from: number): number {
  if (limit === bytes.length && from > 0) return limit;
  for (let at = limit; at > from; at--) if (bytes[at - 1] === 10 || bytes[at - 1] === 13) return at;
  return limit;
}

const endsLine = (bytes: Uint8Array) => bytes[bytes.length - 1] === 10 || bytes[bytes.length - 1] === 13;

/** A little more than the file should hold, from the length of its first lines. */
function likelyRows(layout: Layout, size: number): number {
  const lines = layout.sample.length;
  const bytes = layout.sample.reduce(
    (sum, cells) => sum + cells.reduce((n, cell) => n + cell.length + 1, 0),
    0,
  );
  return Number.isFinite(size) ? Math.ceil((1.1 * size * lines) / Math.max(1, bytes)) + 16 : 1_000_000;
}

function joined(a: Uint8Array, b: Uint8Array): Uint8Array<ArrayBuffer> {
  const whole = new Uint8Array(a.length + b.length);
  whole.set(a);
  whole.set(b, a.length);
  return whole;
}

const cancelled = () =>
  new ReadingError("cancelled", "Reading was stopped", "Open the file again to read it");

const endlessLine = () =>
  new ReadingError(
    "endless-line",
    "The file is one line without an end",
    "Export the waveform with one row a sample",
  );
