/** Interval, start and their unit, from the column, the header and what is stated; else a question. */
import type { Note, TimeBase } from "../capture.ts";
import type { Setup } from "../setup/schema.ts";
import type { MeasuredInterval } from "./interval.ts";
import type { Layout } from "./layout.ts";
import { formatNumber } from "../format/figure.ts";
import type { StatedTiming } from "./timing.ts";
import { readUnit, scaleBy, type NamedUnit } from "./units.ts";

/** One record along an axis, times in the axis' own unit. */
export interface RecordTime {
  name: NamedUnit | null;
  /** Whether there is a time column. */
  axis: boolean;
  /** First number of a running number that stands in for time. */
  counterFrom: number | null;
  from: number;
  to: number;
  first: number;
  last: number;
  pairs: boolean;
  reversed: boolean;
  measured: MeasuredInterval | null;
  quantum: number;
  mended: number;
  unitSwitches: number;
}

interface Timed {
  timebase: TimeBase;
  notes: Note[];
}

const unitChoices = ["s", "ms", "us", "ns"];
const factors = { s: 1, ms: 1e-3, us: 1e-6, ns: 1e-9, ps: 1e-12 } as const;

/** A question that must be answered before times mean anything. */
const isOpen = ({ code }: Note) => code === "decimal-comma-ambiguous";

export function timeBaseOf(layout: Layout, time: RecordTime, samples: number, setup: Setup): Timed {
  const notes: Note[] = [...mendingNotes(time)];
  if (layout.notes.some(isOpen))
    return { timebase: { start_s: 0, step_s: null, stepUncertainty_s: 0, samples }, notes };
  const unknown = { start_s: 0, step_s: null, stepUncertainty_s: 0, samples };
  if (setup.sampleInterval_s) {
    const start_s = time.axis ? startBySteps(time, setup.sampleInterval_s) : (layout.timing.start_s ?? 0);
    return { timebase: { start_s, step_s: setup.sampleInterval_s, stepUncertainty_s: 0, samples }, notes };
  }
  if (!time.axis || !time.measured) return withoutColumn(layout, time, samples);
  if (Number.isNaN(time.measured.step)) return fromHeader(layout, time, unknown, notes);
  const unit = axisUnit(layout, time, setup);
  notes.push(...unit.notes);
  if (unit.factor === null) return { timebase: unknown, notes };
  return { timebase: fromColumn(layout, time, unit.factor, samples, notes), notes };
}

/** The column gives no step: it never moves, or moves unevenly. */
function fromHeader(layout: Layout, time: RecordTime, unknown: TimeBase, notes: Note[]): Timed {
  const [stated] = layout.timing.intervals;
  const still = time.first === time.last;
  if (!stated || !still) return { timebase: unknown, notes: [...notes, unevenNote()] };
  const start_s = scaleBy(time.first, time.name?.unit?.factor ?? 1);
  return { timebase: { ...unknown, start_s, step_s: stated.step_s }, notes };
}

function fromColumn(
  layout: Layout,
  time: RecordTime,
  factor: number,
  samples: number,
  notes: Note[],
): TimeBase {
  const { step, uncertainty } = time.measured!;
  const measured = scaleBy(step, factor);
  const start_s = scaleBy(time.reversed ? time.last : time.first, factor);
  const coarse = time.quantum > 0.01 * step || uncertainty > 1e-6 * step;
  const stated = layout.timing.intervals.find(({ step_s }) => Math.abs(step_s / measured - 1) < 0.01);
  const other = layout.timing.intervals.find(({ step_s }) => step_s !== stated?.step_s);
  if (stated && coarse) return { start_s, step_s: stated.step_s, stepUncertainty_s: 0, samples };
  if (!stated && other) notes.push(conflictNote(other, measured));
  if (time.measured!.unevenness > 0.02 && time.quantum > 0.05 * step)
    notes.push(roundedNote(measured, scaleBy(uncertainty, factor)));
  const strayed = time.measured!.unevenness;
  if (strayed > 1.5 && strayed * step > 1.05 * time.quantum) notes.push(jitterNote(strayed));
  return { start_s, step_s: measured, stepUncertainty_s: scaleBy(uncertainty, factor), samples };
}

/** Values only (S4, S13), or a running number (S3, S20): start and step from the header, else asked. */
function withoutColumn({ timing }: Layout, time: RecordTime, samples: number): Timed {
  const range = timing.ranges.find(({ length }) => length === samples);
  if (timing.intervals.length === 0 && range && range.start_s !== null && range.stop_s !== null) {
    // Whether the stop is the last sample's time or one step later is not said.
    const step_s = (range.stop_s - range.start_s) / (samples - 1);
    const stepUncertainty_s = step_s / Math.sqrt(12) / (samples - 1);
    return { timebase: { start_s: range.start_s, step_s, stepUncertainty_s, samples }, notes: [] };
  }
  const [stated] = timing.intervals;
  const differing =
    stated && timing.intervals.find(({ step_s }) => Math.abs(step_s / stated.step_s - 1) > 0.01);
  if (stated && !differing && stated.otherwise_s === null) {
    const start_s = timing.start_s ?? 0;
    return { timebase: { start_s, step_s: stated.step_s, stepUncertainty_s: 0, samples }, notes: [] };
  }
  const what = differing
    ? `The header gives two intervals, ${formatNumber(stated.step_s, "s", 6)} (${stated.key}) and ${formatNumber(differing.step_s, "s", 6)} (${differing.key})`
    : stated
      ? `The header's "${stated.key}" has no unit of its own beside a horizontal unit of ${timing.axisUnit}: it is ${formatNumber(stated.step_s, "s")} or ${formatNumber(stated.otherwise_s, "s")}`
      : time.counterFrom === null
        ? "The file holds values only and no interval"
        : "The file counts samples and says nothing of their interval";
  const note: Note = {
    code: "interval-unknown",
    text: `${what}: times and everything that hangs on them are missing.`,
    question: "What is the sample interval in seconds?",
    answers: "sampleInterval_s",
    ...(stated ? { choices: choicesOf(timing) } : {}),
  };
  return { timebase: { start_s: 0, step_s: null, stepUncertainty_s: 0, samples }, notes: [note] };
}

const choicesOf = ({ intervals }: StatedTiming) => [
  ...new Set(
    intervals
      .flatMap(({ step_s, otherwise_s }) => [step_s, otherwise_s ?? step_s])
      .map((step_s) => String(step_s)),
  ),
];

/** Stated, written in the column's head, told by the header's interval, or assumed to be seconds. */
function axisUnit(layout: Layout, time: RecordTime, setup: Setup): { factor: number | null; notes: Note[] } {
  if (setup.timeUnit) return { factor: factors[setup.timeUnit], notes: [] };
  const known = time.name?.unit;
  if (known?.symbol === "s" && time.unitSwitches === 0) return { factor: known.factor, notes: [] };
  const step = time.measured!.step;
  const byInterval = layout.timing.intervals.flatMap(({ step_s }) =>
    Object.values(factors).filter((factor) => Math.abs(scaleBy(step, factor) / step_s - 1) < 0.01),
  );
  if (byInterval.length > 0) {
    const open = layout.timing.intervals.some(({ otherwise_s }) => otherwise_s !== null);
    const notes = open && byInterval[0] === 1 ? [axisOrScaleNote(layout.timing.axisUnit ?? "")] : [];
    return { factor: byInterval[0], notes };
  }
  const stated = layout.timing.axisUnit === null ? null : readUnit(layout.timing.axisUnit, true);
  if (stated?.symbol === "s" && time.unitSwitches === 0) return { factor: stated.factor, notes: [] };
  if (time.unitSwitches > 0) return { factor: null, notes: [switchNote(time.unitSwitches)] };
  return { factor: 1, notes: [assumedNote(step)] };
}

const startBySteps = (time: RecordTime, step_s: number) => {
  const { step } = time.measured ?? { step: NaN };
  const start = time.reversed ? time.last : time.first;
  return Number.isFinite(step) && step > 0 ? Math.round(start / step) * step_s : 0;
};

const assumedNote = (step: number): Note => ({
  code: "time-unit-assumed",
  text: `The file does not say in which unit its times are; taken as seconds (interval ${formatNumber(step, "s", 6)}).`,
  question: "In which unit is the time column?",
  choices: unitChoices,
  answers: "timeUnit",
});

const axisOrScaleNote = (unit: string): Note => ({
  code: "time-unit-assumed",
  text: `The header names ${unit} as the horizontal unit, which may be that of the times or only of the screen's scale; times and interval are taken as seconds.`,
  question: "In which unit is the time column?",
  choices: unitChoices,
  answers: "timeUnit",
});

const switchNote = (switches: number): Note => ({
  code: "time-unit-unknown",
  text: `The time column changes to another unit ${switches === 1 ? "once" : `${switches} times`} where its numbers pass 1, and names none: times are put in line, their unit is missing.`,
  question: "In which unit are the numbers below 1000 that follow the change?",
  choices: unitChoices,
  answers: "timeUnit",
});

const unevenNote = (): Note => ({
  code: "uneven-time",
  text: "The rows are not evenly spaced in time, so there is no sample interval.",
  question:
    "Export with a fixed sample interval, or state the interval in seconds if the time column is wrong.",
  answers: "sampleInterval_s",
});

const jitterNote = (steps: number): Note => ({
  code: "time-jitter",
  text: `Times stray from an even spacing by up to ${steps.toPrecision(2)} samples; the interval is that of the whole record.`,
});

const conflictNote = (stated: { step_s: number; key: string }, measured: number): Note => ({
  code: "interval-conflict",
  text: `The header's "${stated.key}" gives ${formatNumber(stated.step_s, "s", 6)}, the time column ${formatNumber(measured, "s", 6)}; the column is used.`,
  question: "Which sample interval is right, in seconds?",
  choices: [String(measured), String(stated.step_s)],
  answers: "sampleInterval_s",
});

const roundedNote = (step_s: number, u: number): Note => ({
  code: "time-rounded",
  text: `The time column is rounded more coarsely than its step; the interval ${formatNumber(step_s, "s", 6)} is span/(n − 1), good to ${formatNumber(u, "s", 2)}.`,
});

function mendingNotes(time: RecordTime): Note[] {
  const notes: Note[] = [];
  const lost = (time.measured?.gaps ?? []).reduce((sum, { missing }) => sum + missing, 0);
  if (lost > 0)
    notes.push({
      code: "rows-missing",
      text: `${lost} samples are missing inside the record (the time column jumps); they count as unusable.`,
    });
  if (time.mended > 0)
    notes.push({
      code: "time-mended",
      text: `${time.mended} cells of the time column do not fit their neighbours and were put in line.`,
    });
  if (time.reversed)
    notes.push({
      code: "time-descending",
      text: "Time runs backwards in the file; the record was turned round.",
    });
  return notes;
}
