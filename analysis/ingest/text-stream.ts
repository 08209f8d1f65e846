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
    let bytes: Uint8Array = new Uint8Array(0);
    while (bytes.length < length / 2 || bytes.length % 2 === 1) {
      const part = await this.source.read(this.consumed, length - bytes.length);
      this.consumed += part.length;
      if (part.length === 0) {
        this.ended = true;
        break;
      }
      bytes = bytes.length === 0 ? part : concatenate(bytes, part);
    }
    return bytes;
  }
}

/** `into`: memory of at least their length. */
export function concatenate(a: Uint8Array, b: Uint8Array, into?: ArrayBufferLike): Uint8Array {
  const length = a.length + b.length;
  const whole = new Uint8Array(into ?? new ArrayBuffer(length), 0, length);
  whole.set(a);
  whole.set(b, a.length);
  return whole;
}
