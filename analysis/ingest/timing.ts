/** What the header says about time: interval or rate, start, record lengths, the axis' unit. */
import type { Header, Setting } from "./header.ts";
import { readUnit, scaleBy } from "./units.ts";

interface StatedInterval {
  /** A number without a unit is taken as seconds. */
  step_s: number;
  key: string;
  line: number;
  /** What it would be, had the bare number the axis' unit; null where that can't be. */
  otherwise_s: number | null;
}

export interface StatedTiming {
  /** Every interval or rate found, in seconds. */
  intervals: StatedInterval[];
  start_s: number | null;
  lengths: number[];
  /** First and last time of so many samples, where they stand together. */
  ranges: { length: number; start_s: number | null; stop_s: number | null }[];
  axisUnit: string | null;
}

const intervalKey =
  /(sampl\w*|time|abtast\w*|horizontal|x|h(or)?)?[\s_.-]*(interval\b|intervall|increment|incr\b|period\b|resolution\b)|^(x|h|t)[\s_]*(delta|step|inc)|^(delta[\s_]*[tx]|d[tx]|Δt|tstep|step)\b|schritt(weite)?|time per (sample|point)|seconds per (sample|point)/i;
const rateKey = /(sampl\w*|abtast\w*)[\s_.-]*(rate|freq\w*)|^(rate|fs|sps)\b|abtastrate/i;
const notTiming = /vert|volt|scale|division|\bdiv\b|trigger (period|interval)|update|y[\s_-]*incr|\by\b/i;
const startKey =
  /^(x|h|t|horizontal|time)?[\s_.-]*(origin|start|zero|t0|first|begin\w*)|^(t|x)0$|start time/i;
const stopKey = /^(x|h|t|horizontal|time)?[\s_.-]*(stop|end|last)|(stop|end)[\s_.-]*(time)?$/i;
const lengthKey = /length|points|samples|\bcount\b|\bmemory\b|number of|anzahl|^n$/i;

export function statedTiming(header: Header): StatedTiming {
  const timing: StatedTiming = { intervals: [], start_s: null, lengths: [], ranges: [], axisUnit: null };
  for (const setting of header.settings) {
    const key = setting.key;
    if (/(horiz\w*|^x|time)[\s_-]*unit/i.test(key)) timing.axisUnit ??= setting.values[0].text;
    else if (rateKey.test(key) && !notTiming.test(key))
      addInterval(timing, setting, (value) => 1 / value, "Hz");
    else if (intervalKey.test(key) && !notTiming.test(key))
      addInterval(timing, setting, (value) => value, "s");
    else if (lengthKey.test(key)) addLengths(timing, setting);
    else if (stopKey.test(key) && timing.ranges.length > 0)
      timing.ranges[timing.ranges.length - 1].stop_s ??= quantity(setting, "s");
    else if (startKey.test(key)) addStart(timing, quantity(setting, "s"));
  }
  addFromNames(timing, header);
  addOtherwise(timing, header);
  return timing;
}

/** No oscilloscope samples faster than this. */
const shortest_s = 1e-11;

/** "Horizontal Units,ms" beside "Sample Interval,0.008": the unit may be the interval's or only the screen's scale. */
function addOtherwise({ intervals, axisUnit }: StatedTiming, { settings }: Header): void {
  const unit = axisUnit === null ? null : readUnit(axisUnit, true);
  if (unit?.symbol !== "s" || unit.factor === 1) return;
  for (const interval of intervals) {
    const setting = settings.find(({ key, line }) => key === interval.key && line === interval.line);
    // Only a bare number passes for a voltage, too.
    if (!setting || rateKey.test(setting.key) || quantity(setting, "V") === null) continue;
    const otherwise_s = scaleBy(interval.step_s, unit.factor);
    if (otherwise_s >= shortest_s) interval.otherwise_s = otherwise_s;
  }
}

function addLengths(timing: StatedTiming, setting: Setting): void {
  const lengths = wholeNumbers(setting);
  timing.lengths.push(...lengths);
  timing.ranges.push(...lengths.map((length) => ({ length, start_s: null, stop_s: null })));
}

/** A start behind a record length belongs to it; the first one is also the file's. */
function addStart(timing: StatedTiming, start_s: number | null): void {
  timing.start_s ??= start_s;
  const range = timing.ranges[timing.ranges.length - 1];
  if (range) range.start_s ??= start_s;
}

function addInterval(timing: StatedTiming, setting: Setting, from: (value: number) => number, unit: string) {
  const value = quantity(setting, unit);
  if (value === null || !(value > 0)) return;
  const step_s = from(value);
  if (step_s > 1e-15 && step_s < 1e5)
    timing.intervals.push({ step_s, key: setting.key, line: setting.line, otherwise_s: null });
}

/** "250000 Hz", "2.0e-06", "5 GS/s", "10 us", or number and unit in neighbouring cells. */
export function quantity({ key, values }: Setting, expected: string): number | null {
  const [first, second] = values;
  const match = /^\s*([+-]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+-]?\d+)?)\s*(.*)$/i.exec(first?.text ?? "");
  if (!match) return null;
  const value = Number(match[1].replace(",", "."));
  const inKey = /[[(]([^\])]+)[\])]/.exec(key)?.[1] ?? /[\s_]in[\s_](\S+)$/.exec(key)?.[1] ?? "";
  const spelled = match[2].trim() || inKey || (second && /^[a-zµμ/]+$/i.test(second.text) ? second.text : "");
  if (spelled === "") return value;
  const rate = /^([kMGT]?)(S|Sa|Sample|Samples|Pts|sps)(\/s(ec)?)?$/i.exec(spelled);
  if (rate && expected === "Hz")
    return scaleBy(value, { "": 1, k: 1e3, m: 1e6, g: 1e9, t: 1e12 }[rate[1].toLowerCase()] ?? 1);
  const unit = readUnit(spelled.split(/[\s,;]/)[0], expected === "s");
  return unit && unit.symbol === expected ? scaleBy(value, unit.factor) : unit ? null : value;
}

function wholeNumbers({ values }: Setting): number[] {
  return values
    .map(({ text }) => Number.parseFloat(text))
    .filter((value) => Number.isInteger(value) && value > 1);
}

/** S3 and S4: two numbers behind the units row; the names above say which is start and which is step. */
function addFromNames(timing: StatedTiming, { names, units }: Header): void {
  if (!names || !units) return;
  const numbers = units
    .map((text, column) => ({ value: Number(text.replace(",", ".")), text: text.trim(), column }))
    .filter(({ value, text }) => text !== "" && Number.isFinite(value));
  if (numbers.length === 0) return;
  const named = (pattern: RegExp) => numbers.find(({ column }) => pattern.test(names[column]?.trim() ?? ""));
  const step = named(/step|inc|interval|delta|^d[tx]$|schritt|pas\b|rate/i) ?? numbers[numbers.length - 1];
  const start = named(/start|origin|first|begin|zero|^[tx]0$/i) ?? numbers.find((number) => number !== step);
  if (step.value > 0)
    timing.intervals.push({
      step_s: step.value,
      key: names[step.column]?.trim() || "step",
      line: 0,
      otherwise_s: null,
    });
  if (start) timing.start_s = start.value;
}

/** Columns of the names row that hold start and step instead of a channel. */
export function timingColumns({ names, units }: Header): number[] {
  if (!names || !units) return [];
  return units.flatMap((text, column) =>
    text.trim() !== "" && Number.isFinite(Number(text.replace(",", "."))) ? [column] : [],
  );
}
