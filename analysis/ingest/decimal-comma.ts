/**
 * "0,5,1,25": a decimal comma between commas. Whole numbers only, an even count of cells, every second
 * of them unsigned and of constant width: offered as a question, never decided alone.
 */
import type { Note } from "../capture.ts";
import type { Sniffed } from "./layout.ts";

export function isCommaAmbiguous({ choice, block, header, sample }: Sniffed): boolean {
  const { separator } = choice.dialect;
  const { numeric } = block;
  if (separator !== "," || sample.length < 2 || numeric.length < 2 || numeric.length % 2 === 1) return false;
  const named = header.names?.filter((name) => name.trim() !== "").length ?? 0;
  if (named > numeric.length / 2) return false;
  if (!sample.every((cells) => numeric.every((column) => /^\s*[+-]?\d+\s*$/.test(cells[column] ?? ""))))
    return false;
  return numeric.every((column, i) => i % 2 === 0 || isFraction(sample.map((cells) => cells[column].trim())));
}

const isFraction = (cells: string[]) =>
  cells.every((cell) => /^\d+$/.test(cell) && cell.length === cells[0].length);

export const commaNote = (): Note => ({
  code: "decimal-comma-ambiguous",
  text: "The commas may part cells or be decimal marks: the numbers fit both. Read as cells, without times.",
  question: "Is the comma of this file a decimal mark?",
  choices: [".", ","],
  answers: "decimalMark",
});
