/**
 * Memory that is used again: a page touched for the first time costs more than parsing into it does.
 * Shared memory goes to threads and comes back without being handed over.
 */
import { likelyRows, type BulkPlan, type ParsedChunk } from "./bulk.ts";

type MemoryKind = typeof ArrayBuffer | typeof SharedArrayBuffer;

/** Pieces differ by a line: rounded up, the memory of one does for the next. */
const rounded_bytes = 65_536;

/** Memory for pieces of text and for the values parsed from them. */
export class PieceMemory {
  private readonly texts: ArrayBufferLike[] = [];
  private readonly columns: ArrayBufferLike[] = [];

  constructor(private readonly kind: MemoryKind) {}

  text(bytes: number): ArrayBufferLike {
    return this.take(this.texts, bytes);
  }

  /** For each wanted column of a piece of so many bytes. */
  values(bytes: number, plan: BulkPlan): ArrayBufferLike[] {
    return plan.columns.map(() => this.take(this.columns, 8 * likelyRows(bytes, plan)));
  }

  releaseText({ buffer }: Uint8Array): void {
    this.texts.push(buffer);
  }

  /** What a piece of many short lines grew beyond may be of another kind. */
  releaseValues({ values }: ParsedChunk): void {
    this.columns.push(...values.map(({ buffer }) => buffer).filter((buffer) => buffer instanceof this.kind));
  }

  clear(): void {
    this.texts.length = this.columns.length = 0;
  }

  private take(free: ArrayBufferLike[], bytes: number): ArrayBufferLike {
    const at = free.findIndex(({ byteLength }) => byteLength >= bytes);
    if (at >= 0) return free.splice(at, 1)[0];
    // What is too small now will be too small again.
    free.length = 0;
    return new this.kind(Math.ceil(bytes / rounded_bytes) * rounded_bytes);
  }
}
