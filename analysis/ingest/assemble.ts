/** Layout and columns → captures: one a record, each on its own time base. */
import type { Capture, Note } from "../capture.ts";
import type { Setup } from "../setup/schema.ts";
import type { Steps } from "../steps.ts";
import { acquisitionOf } from "./acquisition.ts";
import type { AxisGroup } from "./axes.ts";
import { buildChannel, type BuiltChannel, type RawChannel } from "./channel.ts";
import type { Columns } from "./columns.ts";
import { envelopeChannels } from "./envelope.ts";
import type { Layout } from "./layout.ts";
import { damageNotes } from "./damage.ts";
import { guessRoles } from "./roles.ts";
import { shotChannels, wideNote } from "./wide.ts";
import { timeBaseOf, type RecordTime } from "./time-base.ts";
import { axisSpans, stretchOf, withoutAxis } from "./axis-spans.ts";

export function* assemble(layout: Layout, columns: Columns, setup: Setup): Steps<Capture[]> {
  const captures = layout.traces
    ? yield* traceCaptures(layout, layout.traces, setup)
    : yield* columnCaptures(layout, columns, setup);
  captures.forEach((capture, index) => {
    capture.record = { index, count: captures.length, time: segmentTime(layout, index, captures.length) };
  });
  return captures;
}

function* columnCaptures(layout: Layout, columns: Columns, setup: Setup): Steps<Capture[]> {
  const shared: Note[] = [...layout.notes, ...damageNotes(layout, columns)];
  const captures: Capture[] = [];
  let position = 0;
  for (const group of mergeEqualAxes(layout.axes.groups, columns)) {
    const raw = group.values.map((column) => rawChannel(layout, columns, column, position++));
    const wide = wideNote(raw, setup);
    const notes = [...shared, ...(wide ? [wide] : [])];
    for (const time of axisSpans(layout, columns, group))
      for (const channels of shotChannels(raw, setup, wide !== null))
        captures.push(yield* captureOf({ layout, time, channels, setup, notes }));
  }
  return captures;
}

function rawChannel(layout: Layout, columns: Columns, column: number, position: number): RawChannel {
  return {
    position,
    name: layout.names.get(column) ?? { name: "", spelled: null, unit: null },
    values: columns.column(column),
    tally: columns.tallies.get(column)!,
    symbolic: layout.block.symbolic.includes(column),
    column,
  };
}

/** One trace a row: a record each, or channels of one where that is stated. */
function* traceCaptures(layout: Layout, traces: RawChannel[], setup: Setup): Steps<Capture[]> {
  const time = withoutAxis(layout, traces[0].values.length);
  const together =
    setup.wide === "channels" ? [traces.map((trace, position) => ({ ...trace, position }))] : null;
  const captures: Capture[] = [];
  for (const channels of together ?? traces.map((trace) => [trace]))
    captures.push(yield* captureOf({ layout, time, channels, setup, notes: layout.notes }));
  return captures;
}

interface CaptureParts {
  layout: Layout;
  time: RecordTime;
  channels: RawChannel[];
  setup: Setup;
  notes: Note[];
}

function* captureOf({ layout, time, channels, setup, notes }: CaptureParts): Steps<Capture> {
  const cut = time.pairs
    ? yield* envelopeChannels(channels, time)
    : channels.map((raw) => ({ ...raw, values: stretchOf(raw.values, time) }));
  const built: BuiltChannel[] = [];
  for (const raw of cut) built.push(yield* buildChannel(raw, layout, setup));
  const samples = built[0].channel.samples.length;
  const base = timeBaseOf(layout, time, samples, setup);
  const capture: Capture = {
    record: { index: 0, count: 1, time: null },
    channels: built.map(({ channel }) => channel),
    timebase: base.timebase,
    acquisition: [],
    notes: [...base.notes, ...notes, ...built.flatMap((one) => one.notes)],
  };
  const outlines = new Map(built.map(({ channel, outline }) => [channel, outline]));
  capture.notes.push(...guessRoles(capture, outlines));
  const acquired = yield* acquisitionOf(capture, outlines, layout, time.pairs);
  capture.acquisition = acquired.codes;
  capture.notes.push(...acquired.notes);
  return capture;
}

/** Blocks side by side on equal axes are channels of one record. */
function mergeEqualAxes(groups: AxisGroup[], columns: Columns): AxisGroup[] {
  const merged: AxisGroup[] = [];
  for (const group of groups) {
    const twin = merged.find((other) => equalAxes(other, group, columns));
    if (twin) twin.values.push(...group.values);
    else merged.push({ axis: group.axis, values: [...group.values] });
  }
  return merged;
}

function equalAxes(a: AxisGroup, b: AxisGroup, columns: Columns): boolean {
  if (a.axis === null || b.axis === null) return a.axis === b.axis;
  const [one, other] = [columns.times.get(a.axis)!, columns.times.get(b.axis)!];
  if (one.rows !== other.rows || !Object.is(one.first, other.first) || !Object.is(one.last, other.last))
    return false;
  const [values, others] = [one.values(), other.values()];
  if (values && others) return values.every((value, i) => Object.is(value, others[i]));
  return one.anchors.every((value, i) => Object.is(value, other.anchors[i]));
}

/** The table above segmented data gives each its time. */
function segmentTime({ header }: Layout, index: number, count: number): string | null {
  return header.segments.length === count ? (header.segments[index][1]?.trim() ?? null) : null;
}
