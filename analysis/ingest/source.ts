/** Where a capture's bytes come from. Read once, front to back: what comes next is at the next offset. */
export interface ByteSource {
  /** Bytes in all; only progress hangs on it (a compressed file does not know). */
  size: number;
  /** At most `length` bytes at `offset`, good until the next call; none at the end. */
  read(offset: number, length: number): Promise<Uint8Array> | Uint8Array;
}

/** Set from outside to stop a read that is under way. */
export interface CancelSignal {
  readonly aborted: boolean;
}
