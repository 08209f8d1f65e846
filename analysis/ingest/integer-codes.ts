import type { Note } from "../capture.ts";
import type { SetupChannel } from "../setup/schema.ts";
import type { RawChannel } from "./channel.ts";
import type { Layout } from "./layout.ts";

/**
 * Bare small integers with no unit of their own column are converter codes: what a count is worth is
 * not in the file (a scale a division says nothing without the counts a division), so it is asked.
 */
export function integerCodes(raw: RawChannel, layout: Layout, stated: SetupChannel | null): Note | null {
  if (stated?.scale || stated?.unit || unitInRows(raw, layout)) return null;
  let largest = 0;
  let smallest = Infinity;
  for (const value of raw.values) {
    if (value !== value || Math.abs(value) === Infinity) continue;
    if (!Number.isInteger(value) || Math.abs(value) > 65_536) return null;
    largest = Math.max(largest, value);
    smallest = Math.min(smallest, value);
  }
  if (largest - smallest < 4) return null;
  const spelled = layout.sample.some((cells) => /[.,e]/i.test(cells[raw.column] ?? ""));
  if (spelled) return null;
  return {
    code: "scale-unknown",
    text: "The values are whole numbers without a unit: converter counts. The file does not say what one count is worth.",
    question: "What is one count worth (scale, offset and unit of this channel)?",
    answers: "channels",
  };
}

const unitInRows = ({ column, name }: RawChannel, { header }: Layout) =>
  name.unit !== null && (header.units !== null || (header.names?.[column] ?? "") !== "");
