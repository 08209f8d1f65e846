import { decodeText } from "./encoding.ts";

export interface Line {
  /** Counted from 1, as an editor does. */
  number: number;
  /** First byte, counted from the text's beginning. */
  start: number;
  text: string;
}

/**
 * Lines of a piece of a file, ended by LF, CR, CR LF or CR CR LF. A line break inside a quoted cell
 * belongs to the cell. The last line may be cut: the caller knows whether the piece is the whole file.
 */
export function splitLines(bytes: Uint8Array, most = Infinity): Line[] {
  const lines: Line[] = [];
  let number = 1;
  let at = 0;
  while (at < bytes.length && lines.length < most) {
    const end = endOfLine(bytes, at);
    let text = decodeText(bytes.subarray(at, end));
    let next = afterBreak(bytes, end);
    const joined = text.includes('"') && openQuote(text) ? closeQuote(bytes, at, next) : null;
    const first = number++;
    if (joined) {
      ({ text, next } = joined);
      number += joined.breaks;
    }
    lines.push({ number: first, start: at, text });
    at = next;
  }
  return lines;
}

function endOfLine(bytes: Uint8Array, from: number): number {
  let at = from;
  while (at < bytes.length && bytes[at] !== 10 && bytes[at] !== 13) at++;
  return at;
}

function afterBreak(bytes: Uint8Array, end: number): number {
  let at = end;
  while (bytes[at] === 13) {
    at++;
    if (bytes[at] === 10) return at + 1;
    if (!(bytes[at] === 13 && bytes[at + 1] === 10)) return at;
  }
  return bytes[at] === 10 ? at + 1 : at;
}

/** Whether the line ends inside a quoted cell: a quote opens one at a cell's beginning alone (RFC 4180, section 2). */
const openQuote = (text: string) => unclosed.test(text.replaceAll('""', ""));
const unclosed = /^( *"[^"]*"[^,;\t]*[,;\t]| *[^",;\t ][^,;\t]*[,;\t]| *[,;\t])* *"[^"]*$/;

/** Cells of numbers are no text that runs on: a stray quote among samples must not swallow them. */
const isOfNumbers = (text: string) =>
  /^[-+\d.,;eE"\s]+$/.test(text) && /\d/.test(text) && /[,;\t]/.test(text);

/** A quoted cell may run over a few lines, no further: a stray quote must not swallow the file. */
function closeQuote(bytes: Uint8Array, from: number, next: number) {
  let at = next;
  for (let breaks = 1; breaks <= 20 && at < bytes.length; breaks++) {
    const end = endOfLine(bytes, at);
    if (isOfNumbers(decodeText(bytes.subarray(at, end)))) return null;
    at = afterBreak(bytes, end);
    const text = decodeText(bytes.subarray(from, end));
    if (!openQuote(text)) return { text, next: at, breaks };
  }
  return null;
}
