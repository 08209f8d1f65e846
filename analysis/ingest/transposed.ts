/** One trace a row: few lines, thousands of cells, no time. Words before the numbers name the trace. */
import { ReadingError } from "../errors.ts";
import type { Block } from "./block.ts";
import type { RawChannel } from "./channel.ts";
import type { Row } from "./dialect.ts";
import { readCell, type NumberFormat } from "./number.ts";

const fewestCells = 100;
const mostColumns = 1000;

export function isTransposed(block: Block, rows: number): boolean {
  return block.numeric.length >= fewestCells && block.numeric.length > 8 * rows;
}

export function refuseTooWide({ numeric }: Block, line: number): void {
  if (numeric.length <= mostColumns) return;
  throw new ReadingError(
    "too-many-columns",
    `The rows hold ${numeric.length} columns of numbers, too many for channels or shots`,
    `Export at most ${mostColumns} columns, or one trace a row`,
    { line },
  );
}

export function rowChannels(rows: Row[], { numeric }: Block, format: NumberFormat): RawChannel[] {
  const words = [...Array(numeric[0]).keys()];
  const whole = rows.filter(({ cells }) => cells.length > numeric[0]);
  return whole.map(({ cells }) => {
    const tally = { blank: 0, missing: 0, over: 0, text: 0 };
    const values = Float64Array.from(numeric, (column) => {
      const { kind, value } = readCell(cells[column] ?? "", format);
      if (kind !== "number") tally[kind]++;
      return value;
    });
    const name = words
      .map((column) => cells[column].trim())
      .filter(Boolean)
      .join(" ");
    return {
      position: 0,
      name: { name, spelled: null, unit: null },
      values,
      tally,
      symbolic: false,
      column: numeric[0],
    };
  });
}
