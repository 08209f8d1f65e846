/** What stands above and beside the data: settings, a names row, a units row. */
import { filledWidth } from "./cells.ts";
import type { Block } from "./block.ts";
import type { Row } from "./dialect.ts";
import type { Line } from "./lines.ts";
import { readUnit, splitName, timeName } from "./units.ts";

/** One setting: a key and what stands after it, by column. */
export interface Setting {
  key: string;
  values: { text: string; column: number }[];
  line: number;
}

export interface Header {
  settings: Setting[];
  /** By column of the file; "" where it has none. */
  names: string[] | null;
  units: string[] | null;
  /** Lines of a table above the data that name a segment each. */
  segments: string[][];
}

const comment = /^\s*(#|%|;|\/\/|!)+\s?/;

export function readHeader(lines: Line[], rows: Row[], block: Block, separator: string): Header {
  const above: HeaderLine[] = [];
  for (let i = 0; i < block.from; i++) {
    const text = lines[i].text;
    if (text.replace(/[\s,;]/g, "") === "") continue;
    above.push({
      ...rows[i],
      ...(separator === " " ? { cells: wordsOf(text) } : {}),
      text,
      line: lines[i].number,
      comment: comment.test(text) && isComment(text),
    });
  }
  const table = takeNames(above, block);
  const rest = table.rest.map((line) => settingOf(line));
  return {
    settings: [...rest.flat(), ...settingsBeside(lines, rows, block)],
    names: table.names,
    units: table.units,
    segments: table.rest.filter(({ cells }) => /^#\d+$/.test(cells[0].trim())).map(({ cells }) => cells),
  };
}

/** Between blanks a name and its bracketed unit are one cell; two blanks part cells where one does not. */
function wordsOf(text: string): string[] {
  const words = text
    .replace(comment, "")
    .trim()
    .split(/\s{2,}|\t/);
  if (words.length > 1) return words;
  return words[0].split(/\s+(?![([/])/);
}

interface HeaderLine extends Row {
  text: string;
  line: number;
  comment: boolean;
}

// "#1,04-May 10:11:12" is a row of a table of segments, ";" alone may be an empty cell.
const isComment = (text: string) => !/^\s*#\d+\s*[,;\t]/.test(text) && !/^\s*;+\s*$/.test(text);

function takeNames(above: HeaderLine[], block: Block) {
  const rest = [...above];
  let units: string[] | null = null;
  let names: string[] | null = null;
  const last = rest[rest.length - 1];
  if (last && isUnitsRow(last.cells) && fits(last.cells, block)) {
    units = last.cells;
    rest.pop();
  }
  const next = pastRemarks(rest, block);
  if (next && isNamesRow(next, rest, block, units !== null)) {
    names = cellsOf(next, block);
    rest.splice(rest.indexOf(next), 1);
  } else if (units && !units.some((cell) => /\d/.test(cell)) && !next) {
    return namesOrUnits(units, rest);
  }
  return { rest, names, units };
}

/** The last line above the data; where remarks follow a names row that knows its time or units, that row. */
function pastRemarks(above: HeaderLine[], block: Block): HeaderLine | undefined {
  const last = above[above.length - 1];
  const spoken = last?.comment ? above.findLast(({ comment: remark }) => !remark) : undefined;
  if (!spoken || !isNamesRow(spoken, above, block, false)) return last;
  return spoken.cells.some((cell) => timeName.test(splitName(cell).name) || splitName(cell).unit)
    ? spoken
    : last;
}

/** A lone row of words that are all units: "s,A" names a channel A, "s,V" gives units. */
function namesOrUnits(row: string[], rest: HeaderLine[]) {
  const bracketed = row.every((cell) => cell.trim() === "" || /^[([]/.test(cell.trim()));
  return { rest, names: bracketed ? null : row, units: row };
}

function fits(cells: string[], block: Block): boolean {
  const filled = filledWidth(cells);
  const data = block.numeric.length + block.symbolic.length;
  const lastColumn = Math.max(...block.numeric, ...block.symbolic) + 1;
  return filled >= Math.min(data, 2) - 1 && filled <= Math.max(lastColumn, block.width) + 2;
}

/** Unit words only; S3 and S4 put start and step as numbers behind them. */
function isUnitsRow(cells: string[]): boolean {
  const filled = cells.map((cell) => cell.trim()).filter((cell) => cell !== "");
  const words = filled.filter((cell) => !isNumeric(cell));
  const numbersTrail = filled.slice(words.length).every(isNumeric);
  const known = words.filter(
    (cell) => readUnit(cell, true) || /^(count|counts|pts|\(\)|\[\]|-)$/i.test(cell),
  );
  // S3 and S4: two numbers behind prove the row, whatever word stands for the running number.
  const proven = known.length === words.length || (known.length > 0 && words.length < filled.length);
  return words.length > 0 && proven && numbersTrail;
}

const isNumeric = (cell: string) => cell !== "" && Number.isFinite(Number(cell.replace(",", ".")));

function isNamesRow(line: HeaderLine, above: HeaderLine[], block: Block, unitsBelow: boolean): boolean {
  const cells = cellsOf(line, block);
  const filled = cells.map((cell) => cell.trim()).filter((cell) => cell !== "");
  if (!fits(cells, block) || filled.length === 0) return false;
  if (line.comment && /[:=]/.test(line.text)) return false;
  if (unitsBelow) return true;
  if (!/\p{L}/u.test(filled.join(""))) return false;
  const values = block.numeric.length + block.symbolic.length;
  if (filled.length < Math.min(values, 2) && values > 1) return false;
  if (values === 1 && isMarker(filled[0], above)) return false;
  return !isSetting(cells, above);
}

/** The preamble's last words before the data ("Samples follow") name nothing. */
function isMarker(text: string, above: HeaderLine[]): boolean {
  const settings = above.filter(({ cells }) => filledWidth(cells) >= 2).length;
  return settings >= 2 && !splitName(text).unit && !/^(ch|channel|c)?\s*\d+$/i.test(text);
}

/** A key with its value that happens to be as wide as the data. */
function isSetting(cells: string[], above: HeaderLine[]): boolean {
  const [first, ...others] = cells.map((cell) => cell.trim());
  if (timeName.test(first) || splitName(first).unit) return false;
  const value = others.filter((cell) => cell !== "");
  const keyLike = value.every((cell) => isNumeric(cell) || readUnit(cell) || /^(on|off|ac|dc)$/i.test(cell));
  const company = above.slice(-4, -1).filter((line) => filledWidth(line.cells) === filledWidth(cells)).length;
  const pair = value.length <= 1 && first !== "" && company >= 2;
  return value.length > 0 && keyLike && (pair || value.some(isNumeric));
}

function cellsOf(line: HeaderLine, block: Block): string[] {
  if (!line.comment) return line.cells;
  const text = line.text.replace(comment, "");
  const split =
    line.cells.length > 1 ? line.cells.map((cell, i) => (i ? cell : cell.replace(comment, ""))) : [text];
  return split[0] === "" && split.length > block.width ? split.slice(1) : split;
}

function settingOf(line: HeaderLine): Setting[] {
  const spoken = /^\s*([^:=,;\t]+?)\s*[:=]\s+([^,;\t]+)$/.exec(line.text.replace(/[\s,;]+$/, ""));
  if (spoken && !line.comment) return [oneValue(spoken[1], spoken[2], line.line)];
  const values = line.cells
    .map((text, column) => ({ text: text.trim(), column }))
    .filter(({ text }) => text !== "");
  if (
    !line.comment &&
    values.length > 1 &&
    values[0].column === 0 &&
    !/^[^:=]+[:=]\s*\S/.test(values[0].text)
  ) {
    return [{ key: values[0].text.replace(/\s*[:=]$/, ""), values: values.slice(1), line: line.line }];
  }
  const text = line.text.replace(comment, "").replace(/[\s,;]+$/, "");
  const match = /^\s*([^:=]+?)\s*[:=]+\s*(.+)$/.exec(text);
  if (!match) return [];
  return [
    { key: match[1], values: [{ text: match[2].replace(/:$/, "").trim(), column: 1 }], line: line.line },
  ];
}

const oneValue = (key: string, text: string, line: number): Setting => ({
  key,
  values: [{ text, column: 1 }],
  line,
});

/** Settings in the columns left or right of the data: in each stretch of cells, a key and its value. */
function settingsBeside(lines: Line[], rows: Row[], block: Block): Setting[] {
  const settings: Setting[] = [];
  const data = new Set([...block.numeric, ...block.symbolic]);
  for (let i = Math.max(0, block.from - 1); i < Math.min(block.to, block.from + 200); i++) {
    let open: Setting | null = null;
    for (const [column, cell] of rows[i].cells.entries()) {
      const text = cell.trim();
      if (data.has(column) || text === "") open = null;
      else if (open) open.values.push({ text, column });
      else if (!isNumeric(text))
        settings.push((open = { key: text.replace(/:$/, ""), values: [], line: lines[i].number }));
    }
  }
  return settings.filter(({ values }) => values.length > 0);
}

/** The "key:value:" or "key=value" lines of a settings file. */
export function sidecarSettings(text: string): Setting[] {
  return text.split(/[\r\n]+/).flatMap((line, i) => {
    const match = /^\s*([^:=]+?)\s*[:=]\s*(.*?)[:;,\s]*$/.exec(line);
    return match && match[2] !== ""
      ? [{ key: match[1], values: [{ text: match[2], column: 1 }], line: i + 1 }]
      : [];
  });
}
