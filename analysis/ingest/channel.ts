/** One column → one channel in final units, with its resolution and what can't be used of it. */
import type { Channel, Note } from "../capture.ts";
import type { Setup, SetupChannel } from "../setup/schema.ts";
import { overSamples, type Steps } from "../steps.ts";
import type { ColumnTally } from "./bulk.ts";
import type { Layout } from "./layout.ts";
import { estimateLsb } from "./lsb.ts";
import { outlineOf, type Outline } from "./outline.ts";
import { findUnusable } from "./overrange.ts";
import { integerCodes } from "./integer-codes.ts";
import { readUnit, scaleBy, type NamedUnit } from "./units.ts";

export interface RawChannel {
  position: number;
  name: NamedUnit;
  /** As the file has them; NaN for none, ±Infinity for over range. */
  values: Float64Array;
  tally: ColumnTally;
  symbolic: boolean;
  column: number;
}

export interface BuiltChannel {
  channel: Channel;
  /** Of the samples in their final unit. */
  outline: Outline;
  notes: Note[];
}

export function* buildChannel(raw: RawChannel, layout: Layout, setup: Setup): Steps<BuiltChannel> {
  const name = raw.name.name || String(raw.position + 1);
  const stated = statedChannel(setup, raw.position, name);
  const codes = raw.symbolic ? null : yield* integerCodes(raw, layout, stated);
  const factor = raw.name.unit?.factor ?? 1;
  const scale = stated?.scale ?? 1;
  const offset = stated?.offset ?? 0;
  const samples = raw.values;
  const outline = yield* outlineOf(samples);
  const lsb = estimateLsb(samples);
  const { unusable, overrange } = yield* findUnusable(samples, outline, lsb);
  for (const values of [samples, outline.extremes]) yield* applyScale(values, factor, scale, offset);
  const channel: Channel = {
    position: raw.position,
    name,
    unit: stated?.unit
      ? (readUnit(stated.unit)?.symbol ?? stated.unit)
      : codes
        ? "counts"
        : (raw.name.unit?.symbol ?? ""),
    fileUnit: raw.name.spelled,
    role: stated?.role ?? "other",
    roleGuessed: !stated?.role,
    scale,
    offset,
    samples,
    lsb: lsb === null ? null : scaleBy(lsb, factor) * Math.abs(scale),
    unusable,
    overrange,
  };
  return { channel, outline, notes: channelNotes(channel, raw, codes) };
}

/** Stated by position, else by name; the unit a user states may carry a prefix of its own. */
export function statedChannel(setup: Setup, position: number, name: string): SetupChannel | null {
  const channels = setup.channels ?? [];
  const at = channels.find((channel) => channel.position === position);
  return (
    at ?? channels.find((channel) => (channel.position ?? null) === null && channel.name === name) ?? null
  );
}

/** In place: the column belongs to this channel alone. */
function* applyScale(samples: Float64Array, factor: number, scale: number, offset: number): Steps<void> {
  if (factor === 1 && scale === 1 && offset === 0) return;
  const divisor = factor < 1 ? Math.round(1 / factor) : 1;
  const product = (factor < 1 ? 1 : factor) * scale;
  yield* overSamples(samples.length, (from, to) => {
    for (let i = from; i < to; i++) samples[i] = (samples[i] / divisor) * product + offset;
  });
}

function channelNotes(channel: Channel, raw: RawChannel, codes: Note | null): Note[] {
  const notes: Note[] = codes ? [{ ...codes, channel: channel.name }] : [];
  if (raw.symbolic)
    notes.push({
      code: "symbol-column",
      text: `"${channel.name}" holds symbols or bus words, not measurements: hex words are read as numbers, the rest is left out.`,
      channel: channel.name,
    });
  if (channel.overrange > 0)
    notes.push({
      code: "overrange",
      text: `"${channel.name}" is over range in ${channel.overrange} samples (not a number, or pinned at the screen's edge); no fit uses them.`,
      channel: channel.name,
    });
  return notes;
}
