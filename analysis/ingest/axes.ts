/** Which columns are time axes, which merely count, and which values belong to which axis. */
import type { NamedUnit } from "./units.ts";
import { timeName } from "./units.ts";

export interface AxisGroup {
  /** Column of the axis; null where the values have none. */
  axis: number | null;
  values: number[];
}

export interface Axes {
  groups: AxisGroup[];
  /** A column that only counts rows. */
  counter: number | null;
  counterFrom: number;
}

export interface HeadColumn {
  column: number;
  /** First data rows; NaN where there is no number. */
  head: Float64Array;
  name: NamedUnit;
}

/** `symbolic` columns are values of whichever axis stands before them. */
export function findAxes(numeric: HeadColumn[], symbolic: number[], timingStated: boolean): Axes {
  const counts = (column: HeadColumn, i: number) =>
    (i === 0 || countName.test(column.name.name)) && isCounter(column);
  const counter = numeric.length > 1 || timingStated ? numeric.slice(0, 2).find(counts) : undefined;
  const rest = numeric.filter((column) => column !== counter);
  const first = rest.find(isNamedTime) ?? (timingStated && !counter ? undefined : firstRamp(rest, symbolic));
  const counterFrom = counter ? counter.head[0] : 0;
  const columns = [...rest.map(({ column }) => column), ...symbolic].toSorted((a, b) => a - b);
  const found = { counter: counter?.column ?? null, counterFrom };
  if (!first) return { ...found, groups: [{ axis: null, values: columns }] };
  const axes = rest.filter((column) => column === first || isFurtherAxis(column, first, rest));
  const groups = axes.map((axis, i) => {
    const from = i === 0 ? -1 : axis.column;
    const to = axes[i + 1]?.column ?? Infinity;
    const values = columns.filter((column) => column > from && column < to && column !== axis.column);
    return { axis: axis.column, values };
  });
  const filled = groups.filter(({ values }) => values.length > 0);
  return { ...found, groups: filled.length > 0 ? filled : [{ axis: null, values: columns }] };
}

const countName = /^(#|n|no|nr|nummer|sample|samples|index|point|count|number)\b/i;

/** Of a counter's steps this share may go astray: lines lost or written twice, a damaged cell. */
const strayCounts = 0.02;

/**
 * 0, 1, 2 … (or from 1; from anywhere where the file's beginning is lost and no name says time), starting anew
 * where a record does; a stated unit of time makes it a time. Empty and damaged cells count for nothing.
 */
function isCounter({ head, name }: HeadColumn): boolean {
  const counts = head.filter(Number.isInteger);
  if (name.unit || counts.length < 2 || counts.length < (1 - strayCounts) * head.length) return false;
  const [first] = counts;
  const late = first > 1 && !timeName.test(name.name);
  if (!(first === 0 || first === 1 || late)) return false;
  let [restarts, strays] = [0, 0];
  for (let i = 1; i < counts.length; i++) {
    if (counts[i] === counts[i - 1] + 1) continue;
    if (counts[i] === first) restarts++;
    else strays++;
  }
  return restarts <= counts.length / 8 && strays <= strayCounts * counts.length;
}

/** Whether the first column merely counts rows and a time runs beside it, whatever the names row says. */
export function countsBesideTime([count, time, ...values]: Float64Array[]): boolean {
  if (!count || !time || values.length === 0) return false;
  const name = { name: "", spelled: null, unit: null };
  const whole = time.every((value) => Number.isNaN(value) || Number.isInteger(value));
  return isCounter({ column: 0, head: count, name }) && !whole && isEven(time);
}

function isNamedTime({ name, head, column }: HeadColumn): boolean {
  const named = timeName.test(name.name) || (name.name === "" && name.unit?.symbol === "s");
  if (/^(V|A|W|ohm|dB|%|°C?)$/.test(name.unit?.symbol ?? "")) return false;
  // Rounded until nothing is left of the steps: the header may still know the interval.
  if (named && name.unit?.symbol === "s" && head.every((value) => value === head[0])) return true;
  // Packets of two rows go up and down as often: a time all the same, refused later by name.
  if (named || name.unit?.symbol === "Hz") return isMonotonic(head, 0.45);
  return name.unit?.symbol === "s" && (column === 0 ? isMonotonic(head, 0.7) : isEven(head));
}

/** Unnamed: the first column that rises or falls evenly, if something is left to be the values. */
function firstRamp(columns: HeadColumn[], symbolic: number[]): HeadColumn | undefined {
  if (columns.length + symbolic.length < 2) return undefined;
  return columns
    .slice(0, 2)
    .find(({ head, name }) => (!name.unit || name.unit.symbol === "s") && isEven(head));
}

function isFurtherAxis(column: HeadColumn, first: HeadColumn, all: HeadColumn[]): boolean {
  const at = all.indexOf(column);
  if (at <= all.indexOf(first) + 1 || at === all.length - 1) return false;
  if (column.name.unit && column.name.unit.symbol !== "s") return false;
  if (column.head.every((value, i) => Object.is(value, first.head[i]))) return true;
  return isEven(column.head) && (isNamedTime(column) || all.length % 2 === 0);
}

/** Steps in one direction, repeats and the joints of records apart. */
export function isMonotonic(head: Float64Array, share = 0.97): boolean {
  let up = 0;
  let down = 0;
  for (let i = 1; i < head.length; i++) {
    if (head[i] > head[i - 1]) up++;
    else if (head[i] < head[i - 1]) down++;
  }
  return up + down > 0 && Math.max(up, down) >= share * (up + down);
}

/** Monotonic, and as good as straight over each half: rounding, repeats and a few cells without a number allowed. */
function isEven(cells: Float64Array): boolean {
  const head = cells.filter((value) => !Number.isNaN(value));
  if (head.length < 2 || head.length < 0.95 * cells.length || !isMonotonic(head)) return false;
  const direction = Math.sign(longestRise(head));
  let from = 0;
  for (let i = 1; i <= head.length; i++) {
    const joint = i === head.length || (head[i] - head[i - 1]) * direction < 0;
    if (!joint) continue;
    if (i - from > 2 && !isStraight(head.subarray(from, i))) return false;
    from = i;
  }
  return true;
}

const longestRise = (head: Float64Array) => {
  let sum = 0;
  for (let i = 1; i < head.length; i++) sum += Math.sign(head[i] - head[i - 1]);
  return sum;
};

function isStraight(values: Float64Array): boolean {
  const last = values.length - 1;
  const step = (values[last] - values[0]) / last;
  let largestStep = 0;
  let largestError = 0;
  for (let i = 1; i <= last; i++) {
    largestStep = Math.max(largestStep, Math.abs(values[i] - values[i - 1]));
    largestError = Math.max(largestError, Math.abs(values[i] - values[0] - i * step));
  }
  return largestError <= Math.max(1.05 * largestStep, 0.02 * Math.abs(values[last] - values[0]));
}
