/** Names and units of the columns, from whatever row or setting holds them. */
import type { Block } from "./block.ts";
import type { Header, Setting } from "./header.ts";
import { timingColumns } from "./timing.ts";
import { readUnit, splitName, timeName, type NamedUnit } from "./units.ts";

const unitKey = /unit|einheit/i;
const horizontalKey = /horiz|^x\b|time|zeit/i;
const nameKey = /^(source|input|channel|trace|signal|waveform|ch|label|name|kanal|quelle)( name)?$/i;

/** `uncounted`: the first column merely counts rows, which a names row may leave out. */
export function nameColumns(header: Header, block: Block, uncounted: boolean): Map<number, NamedUnit> {
  const columns = [...block.numeric, ...block.symbolic].toSorted((a, b) => a - b);
  const named = new Map<number, NamedUnit>();
  const shift = columnShift(header, columns, uncounted);
  for (const column of columns) {
    const { name, spelled, unit } = splitName(header.names?.[column + shift] ?? "");
    const below = header.units?.[column + shift]?.trim() ?? "";
    const time = timeName.test(name) || (column === columns[0] && name === "");
    const belowUnit = below === "" ? null : readUnit(below, time);
    named.set(column, {
      name,
      spelled: below === "" ? spelled : below.replace(/^[([]\s*(.*?)\s*[)\]]$/, "$1"),
      unit: below === "" ? unit : belowUnit,
    });
  }
  addFromSettings(named, header, columns);
  return named;
}

/**
 * The names row has as many cells as the data, or one to three more. Values only with start and step
 * behind (S4), or a running number that the names row does not count, move the names by a column.
 */
function columnShift({ names, units }: Header, columns: number[], uncounted: boolean): number {
  if (!names) return 0;
  if (uncounted && names.length === columns.length - 1) return -1;
  const channels = names.filter(
    (name, i) => name.trim() !== "" && !timingColumns({ names, units } as Header).includes(i),
  );
  return channels.length === columns.length - 1 &&
    names[0].trim() !== "" &&
    columns[0] === 0 &&
    !timeName.test(splitName(names[0]).name) &&
    !/^(n|no|#|count|sample|index|point)/i.test(names[0])
    ? -1
    : 0;
}

/** Settings name what the rows left open: the one channel of the file, or each by its column. */
function addFromSettings(named: Map<number, NamedUnit>, header: Header, columns: number[]): void {
  for (const setting of header.settings) {
    const isUnit = unitKey.test(setting.key) && !horizontalKey.test(setting.key);
    if (!isUnit && !nameKey.test(setting.key)) continue;
    for (const { text, column } of placed(setting, columns)) {
      const entry = named.get(column);
      if (!entry) continue;
      if (!isUnit) entry.name ||= text;
      else if (!entry.unit) Object.assign(entry, { spelled: text, unit: readUnit(text) });
    }
  }
}

/** A value in a channel's own column belongs to it; one value alone to the nearest channel on its right. */
function placed({ values }: Setting, columns: number[]): { text: string; column: number }[] {
  const own = values.filter(({ column }) => columns.includes(column));
  if (own.length > 0 && (values.length > 1 || columns.length <= 2))
    return own.filter(({ column }) => column > columns[0] || columns.length === 1);
  const [{ text, column }] = values;
  const right = columns.filter((candidate) => candidate > column);
  const target = right.length >= 2 ? right[1] : (columns[1] ?? columns[0]);
  return [{ text, column: target }];
}
