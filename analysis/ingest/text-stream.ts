import { detectEncoding, utf16ToUtf8, type Encoding } from "./encoding.ts";
import type { ByteSource } from "./source.ts";

/** A source's text from front to back, as UTF-8 or single bytes, without its byte order mark. */
export class TextStream {
  ended = false;
  consumed = 0;
  readonly size: number;
  private encoding: Encoding | null = null;

  constructor(private readonly source: ByteSource) {
    this.size = source.size;
  }

  /** About the next `length` bytes; sets `ended` once the source has no more. */
  async next(length: number): Promise<Uint8Array> {
    let bytes = await this.read(length);
    if (this.encoding === null) {
      const { encoding, mark } = detectEncoding(bytes);
      this.encoding = encoding;
      bytes = bytes.subarray(mark);
    }
    return this.encoding === "bytes" ? bytes : utf16ToUtf8(bytes, this.encoding);
  }

  /** About `length` bytes (an even number: whole code units), few only at the end. */
  private async read(length: number): Promise<Uint8Array> {
    const parts: Uint8Array[] = [];
    let held = 0;
    while (held < length / 2 || held % 2 === 1) {
      const part = await this.source.read(this.consumed, length - held);
      if (part.length === 0) {
        this.ended = true;
        break;
      }
      parts.push(part);
      held += part.length;
      this.consumed += part.length;
    }
    if (parts.length === 1) return parts[0];
    const whole = new Uint8Array(held);
    let at = 0;
    for (const part of parts) {
      whole.set(part, at);
      at += part.length;
    }
    return whole;
  }
}
