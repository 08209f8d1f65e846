import { createReadStream } from "node:fs";
import { createGunzip } from "node:zlib";
import { decodeText, detectEncoding, utf16ToUtf8 } from "../../analysis/ingest/encoding.ts";

/** Enough for two hundred lines of many channels. */
const mostBytes = 64 * 1024;
const longestLine = 2000;

/** The first lines of a file as text, to be seen beside a question about it. */
export async function fileHead(path: string, lines: number): Promise<{ lines: string[]; more: boolean }> {
  const file = createReadStream(path);
  const stream = /\.gz$/i.test(path) ? file.pipe(createGunzip()) : file;
  file.on("error", (error) => stream.destroy(error));
  const chunks: Buffer[] = [];
  let length = 0;
  for await (const chunk of stream as AsyncIterable<Buffer>) {
    chunks.push(chunk);
    length += chunk.length;
    if (length >= mostBytes) break;
  }
  const all = textOf(Buffer.concat(chunks)).split(/\r\r\n|\r\n|\n|\r/);
  // What was cut in the middle of a line, or of a character, is not shown.
  if (length >= mostBytes && all.length > 1) all.pop();
  const shown = all.slice(0, lines).map((line) => line.slice(0, longestLine));
  return { lines: shown, more: all.length > lines || length >= mostBytes };
}

function textOf(head: Uint8Array): string {
  const { encoding, mark } = detectEncoding(head);
  const bytes = head.subarray(mark);
  if (encoding !== "bytes") return decodeText(utf16ToUtf8(bytes, encoding));
  const end = bytes.length < mostBytes ? bytes.length : bytes.lastIndexOf(0x0a) + 1;
  return decodeText(end > 0 ? bytes.subarray(0, end) : bytes);
}
