import { createHash } from "node:crypto";
import { open, type FileHandle } from "node:fs/promises";
import { Readable } from "node:stream";
import { createGunzip } from "node:zlib";
import { ReadingError } from "../../../analysis/errors.ts";
import type { ByteSource } from "../../../analysis/ingest/index.ts";

/** A file as it is read once, front to back: its bytes for the reader, its SHA-256 on the way. */
export interface FileSource {
  source: ByteSource;
  /** Bytes of the file itself, compressed or not. */
  bytes: number;
  /** Share of the file's bytes taken so far. */
  share(): number;
  /** Lower-case hex over the file's bytes; call it after the last read. Throws when the file changed meanwhile. */
  finish(): Promise<string>;
  close(): Promise<void>;
}

export async function openFile(path: string): Promise<FileSource> {
  const handle = await openForReading(path);
  const before = await handle.stat();
  if (before.isDirectory()) {
    await handle.close();
    throw new ReadingError(
      "is-folder",
      `${path} is a folder`,
      "Name a capture file, or open the folder as a whole",
    );
  }
  const raw = new HashedFile(handle);
  const compressed = /\.gz$/i.test(path);
  const source = compressed ? gunzipped(raw) : { size: before.size, read: () => raw.next() };
  return {
    source,
    bytes: before.size,
    share: () => Math.min(1, raw.position / Math.max(1, before.size)),
    async finish() {
      await raw.drain();
      const after = await handle.stat();
      if (after.size !== before.size || after.mtimeMs !== before.mtimeMs)
        throw changedFile(before.size, after.size);
      return raw.digest();
    },
    close: () => raw.close(),
  };
}

const pieceBytes = 2 * 1024 * 1024;

/** Reads one piece ahead, so that the disk and the parser work at the same time. */
class HashedFile {
  position = 0;
  private readonly hash = createHash("sha256");
  private ahead: Promise<Uint8Array> | null = null;
  // Two pieces take turns: one is parsed while the other fills.
  private turn = 0;
  private readonly pieces = [new Uint8Array(pieceBytes), new Uint8Array(pieceBytes)];

  constructor(private readonly handle: FileHandle) {}

  /** What it answers holds until the next call. */
  async next(): Promise<Uint8Array> {
    const bytes = await (this.ahead ?? this.readAt(this.position));
    this.position += bytes.length;
    this.ahead = bytes.length > 0 ? this.readAt(this.position) : null;
    // Who stops early leaves a read behind that nobody awaits.
    this.ahead?.catch(() => undefined);
    this.hash.update(bytes);
    return bytes;
  }

  private async readAt(position: number): Promise<Uint8Array> {
    const piece = this.pieces[this.turn++ % 2];
    const { bytesRead } = await this.handle.read(piece, 0, pieceBytes, position);
    return piece.subarray(0, bytesRead);
  }

  async drain(): Promise<void> {
    while ((await this.next()).length > 0);
  }

  async close(): Promise<void> {
    await this.ahead?.catch(() => undefined);
    await this.handle.close();
  }

  digest(): string {
    return this.hash.digest("hex");
  }
}

/** What decompression yields, piece by piece; its length is not known beforehand. */
function gunzipped(raw: HashedFile): ByteSource {
  const compressed = Readable.from(
    (async function* () {
      for (;;) {
        const bytes = await raw.next();
        if (bytes.length === 0) return;
        yield bytes.slice();
      }
    })(),
  );
  const gunzip = compressed.on("error", (error) => gunzip.destroy(error)).pipe(createGunzip());
  const pieces = gunzip[Symbol.asyncIterator]();
  return {
    size: Infinity,
    async read() {
      try {
        const { done, value } = await pieces.next();
        return done ? new Uint8Array(0) : (value as Uint8Array);
      } catch (error) {
        throw new ReadingError(
          "damaged-archive",
          `The compressed file can't be unpacked (${(error as Error).message})`,
          "Copy it again from where it came",
        );
      }
    },
  };
}

async function openForReading(path: string): Promise<FileHandle> {
  try {
    return await open(path, "r");
  } catch (error) {
    const { code, message } = error as NodeJS.ErrnoException;
    if (code === "ENOENT")
      throw new ReadingError("not-found", `There is no file ${path}`, "Check the name and the folder");
    if (code === "EACCES" || code === "EPERM")
      throw new ReadingError(
        "no-permission",
        `${path} may not be read`,
        "Ask for the right to read it, or copy it to a folder of yours",
      );
    throw new ReadingError(
      "unreadable",
      `${path} can't be opened (${message})`,
      "Check the drive it lies on",
    );
  }
}

const changedFile = (before: number, after: number) =>
  new ReadingError(
    "file-changed",
    `The file changed while it was read (${before} bytes before, ${after} after)`,
    "Open it again when the export has finished",
  );
