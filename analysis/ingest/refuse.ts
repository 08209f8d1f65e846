/** Bytes that can be no capture, told by their first bytes. */
import { ReadingError } from "../errors.ts";

const kinds: [number[], string, string][] = [
  [[0x89, 0x50, 0x4e, 0x47], "picture", "a PNG picture"],
  [[0xff, 0xd8, 0xff], "picture", "a JPEG picture"],
  [[0x47, 0x49, 0x46, 0x38], "picture", "a GIF picture"],
  [[0x42, 0x4d], "picture", "a BMP picture"],
  [[0x25, 0x50, 0x44, 0x46], "document", "a PDF document"],
  [[0x50, 0x4b, 0x03, 0x04], "archive", "a ZIP archive or spreadsheet workbook"],
  [[0x1f, 0x8b], "compressed", "gzip-compressed data"],
];

export function refuseForeign(head: Uint8Array): void {
  if (head.every((byte) => byte === 32 || (byte >= 9 && byte <= 13)))
    throw new ReadingError(
      "empty-file",
      "The file is empty",
      "Save the capture again; the export may have been interrupted",
    );
  const kind = kinds.find(([magic]) => magic.every((byte, i) => head[i] === byte));
  const binary = kind?.[1] === "picture" && kind[0].length === 2 ? hasControl(head) : kind !== undefined;
  if (kind && binary)
    throw new ReadingError(
      `not-text-${kind[1]}`,
      `The file is ${kind[2]}, whatever its name says`,
      "Export the waveform's samples as text (CSV)",
      { byte: 0 },
    );
  const nul = head.indexOf(0);
  if (nul >= 0) throw nulByte(nul);
}

export const nulByte = (byte: number) =>
  new ReadingError(
    "nul-bytes",
    `There is a NUL byte at byte ${byte}: the file is binary or was cut while it was written`,
    "Export the waveform as text (CSV) again and remove the storage medium only when it is idle",
    { byte },
  );

const hasControl = (head: Uint8Array) => head.subarray(0, 200).some((byte) => byte < 9);
