import type { Note } from "../capture.ts";
import type { SetupChannel } from "../setup/schema.ts";
import { overSamples, type Steps } from "../steps.ts";
import type { RawChannel } from "./channel.ts";
import type { Layout } from "./layout.ts";

/**
 * Bare small integers with no unit of their own column are converter codes: what a count is worth is
 * not in the file (a scale a division says nothing without the counts a division), so it is asked.
 */
export function* integerCodes(
  raw: RawChannel,
  layout: Layout,
  stated: SetupChannel | null,
): Steps<Note | null> {
  if (stated?.scale || stated?.unit || unitInRows(raw, layout)) return null;
  const range = yield* wholeRange(raw.values);
  if (range < 4) return null;
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

/** Largest less smallest of small whole numbers; −∞ where there is another one, or none at all. */
function* wholeRange(values: Float64Array): Steps<number> {
  let [largest, smallest, whole] = [-Infinity, Infinity, true];
  yield* overSamples(values.length, (from, to) => {
    for (let i = from; i < to && whole; i++) {
      const value = values[i];
      if (value !== value || Math.abs(value) === Infinity) continue;
      if (!Number.isInteger(value) || Math.abs(value) > 65_536) whole = false;
      if (value > largest) largest = value;
      if (value < smallest) smallest = value;
    }
  });
  return whole ? largest - smallest : -Infinity;
}
