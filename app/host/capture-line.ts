import type { CaptureReading } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";

/** `ringbook.capture/1`, the reading with its file around it: one line of JSON for machines. */
export function captureLine(file: string, sha256: string, setup: Setup, reading: CaptureReading): string {
  const { record, ...rest } = reading;
  return JSON.stringify({ format: "ringbook.capture/1", file, sha256, record, setup, ...rest });
}
