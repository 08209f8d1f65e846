/** What judging needs of a pulse's raw samples: block means from switch-off to the next edge. */
import type { CaptureEvidence, PulseEvidence } from "../evidence.ts";
import { makeBlocks, type Blocks } from "../ring/blocks.ts";
import { gatherSecondary, type SecondaryEvidence } from "./secondary.ts";

export interface SparkWindow {
  /** Means less `blocks.level`, in the channel's unit, turned so that the kick goes up. */
  blocks: Blocks;
  /** From switch-off (where unknown: the window's start) to the centre of block 0. */
  first_s: number;
  /** Seconds a block. */
  step_s: number;
  /** File time of switch-off (where unknown: of the window's start). */
  zero_s: number;
  /** File time of switch-off as the reading states it; a bouncing contact opens later for good. */
  switchOff_s: number;
  startsInRing: boolean;
  /** Standard deviation of a block's noise as the samples' own noise gives it. */
  noise: number;
  /** Level before switch-off in the same orientation, less `blocks.level`; null when not seen. */
  levelOn: number | null;
  /** Blocks in one period of the ring. */
  period: number;
  secondary: SecondaryEvidence | null;
  /** Half-waves end flat at one level: a diode takes part of every cycle, and the ring is not free. */
  cutBelow: boolean;
  /** The capture's own time axis, for positions in samples. */
  raw: { start_s: number; step_s: number };
}

/** Enough to place an onset to a hundredth of a period, few enough to judge fast. */
const BLOCKS_PER_PERIOD = 64;
/** Of the trace's own size: no record is more exact. */
const LEAST_NOISE = 1e-6;
/** A ring is judged over this many periods at most: later there is nothing left of any. */
const MOST_PERIODS = 60;

/**
 * `period`: of the ring, in samples (ringPeriods). Null where no ring channel or no oscillation is known: nothing to judge by.
 */
export function gatherWindow(
  evidence: CaptureEvidence,
  pulse: PulseEvidence,
  period: number | null,
): SparkWindow | null {
  const step_s = evidence.timebase.step_s;
  if (evidence.map.ring === null || step_s === null) return null;
  if (period === null) return null;
  const { samples, unusable, lsb } = evidence.channels[evidence.map.ring];
  const decimation = Math.max(1, Math.floor(period / BLOCKS_PER_PERIOD));
  // The first whole sample after the edge still holds part of it.
  const opened =
    pulse.switchOff === null ? pulse.freeFrom : Math.max(pulse.freeFrom, Math.ceil(pulse.switchOff) + 1);
  const closed = lastClosed(pulse, samples, opened, opened + 0.3 * period, lsb ?? 0);
  const from = closed === null ? opened : closed + 2;
  const to = Math.min(pulse.freeTo, from + Math.ceil(MOST_PERIODS * period), samples.length);
  if (to - from < 8 * decimation) return null;
  const blocks = makeBlocks(samples, from, to, unusable, decimation);
  if (blocks.used < 8) return null;
  if (pulse.polarity < 0) turn(blocks);
  const zero = closed === null ? (pulse.switchOff ?? from) : closed + 0.5;
  const levelOn = pulse.levelOn === null ? null : pulse.polarity * pulse.levelOn - blocks.level;
  const noise = Math.max(
    (pulse.fit?.noise ?? 0) / Math.sqrt(decimation),
    conductionNoise(pulse, samples, decimation),
    // A level may lie still within one step of the converter: its own error is there all the same.
    (lsb ?? 0) / Math.sqrt(12 * decimation),
    LEAST_NOISE * Math.sqrt(blocks.power / blocks.used),
  );
  if (levelOn !== null) leaveOutConduction(blocks, levelOn, noise + (lsb ?? 0) / 3, period / decimation);
  return {
    blocks,
    first_s: (from + (decimation - 1) / 2 - zero) * step_s,
    step_s: decimation * step_s,
    zero_s: evidence.timebase.start_s + zero * step_s,
    switchOff_s: evidence.timebase.start_s + (pulse.switchOff ?? from) * step_s,
    startsInRing: pulse.switchOff === null,
    noise,
    levelOn,
    period: period / decimation,
    secondary: gatherSecondary(evidence, pulse, from, to),
    cutBelow: flatBottom(blocks, 3 * noise + (lsb ?? 0) / 3, period / decimation),
    raw: { start_s: evidence.timebase.start_s, step_s },
  };
}

function turn(blocks: Blocks): void {
  for (let i = 0; i < blocks.count; i++) blocks.values[i] = -blocks.values[i];
  blocks.level = -blocks.level;
  for (let k = 0; k < blocks.moments.length; k++) blocks.moments[k] = -blocks.moments[k];
}

/**
 * The next conduction may begin inside the window: a stretch of a third of a period or more that lies still, nearer
 * to the level of conduction than to what the ring settles to, and lasts to the window's end, all goes. A diode
 * can hold as still and for longer, but the ring goes on after it. Judged by means over stretches, for the two
 * levels may be closer than the noise. A switch closes at once: an arc's plateau is come to by its
 * leakage's fast ring.
 */
function leaveOutConduction(blocks: Blocks, levelOn: number, noise: number, period: number): void {
  const { values, count } = blocks;
  const length = Math.max(4, Math.round(0.3 * period));
  const apart = Math.abs(swingsAbout(blocks, period) - levelOn);
  // Coloured noise moves a mean by up to its own size.
  const near = Math.min(0.5 * apart, Math.max(0.35 * apart, 1.2 * noise));
  let [sum, square, since] = [0, 0, -1];
  for (let i = 0; i < count; i++) {
    sum += values[i] - levelOn;
    square += (values[i] - levelOn) ** 2;
    if (i >= length) {
      sum -= values[i - length] - levelOn;
      square -= (values[i - length] - levelOn) ** 2;
    }
    const mean = sum / length;
    const still =
      i >= length - 1 && square / length - mean * mean < (2 * noise) ** 2 && Math.abs(mean) < near;
    if (still && since < 0) since = i + 1 - length;
    if (!still && i < count - length) since = -1;
  }
  if (since < 0) return;
  if (apart > SURE_APART * noise || closesAtOnce(values, since, levelOn, 4 * noise, period))
    cut(blocks, Math.max(0, since - 2));
}

/** Levels this many σ of a block apart are told by themselves, whatever hum adds. */
const SURE_APART = 6;
/** Blocks that a closing switch takes at most, and the share of the swing before that it takes away. */
const CLOSING = { blocks: 3, share: 0.2 };

/** Whether the trace came to this stretch from its swing in one step; yes where nothing swung any more. */
function closesAtOnce(
  values: Float64Array,
  since: number,
  levelOn: number,
  band: number,
  period: number,
): boolean {
  const far = (i: number) => Math.abs(values[i] - levelOn);
  let last = since + Math.round(0.3 * period) - 1;
  while (last >= 0 && far(last) < band) last--;
  const reach = (from: number) => {
    let most = 0;
    for (let i = Math.max(0, from); i <= last; i++) most = Math.max(most, far(i));
    return most;
  };
  const swing = reach(last - Math.round(period));
  return swing < 2 * band || reach(last - CLOSING.blocks) > CLOSING.share * swing;
}

/** Mean over whole periods, after the first: what the ring swings about. */
function swingsAbout({ values, count }: Blocks, period: number): number {
  const from = count > 3 * period ? Math.round(period) : 0;
  const to = Math.round(from + Math.max(1, Math.floor((0.7 * count - from) / period)) * period);
  let sum = 0;
  for (let i = from; i < Math.min(to, count); i++) sum += values[i];
  return sum / Math.max(1, Math.min(to, count) - from);
}

function cut(blocks: Blocks, end: number): void {
  blocks.count = end;
  const segments: number[] = [];
  for (let s = 0; s < blocks.segments.length; s += 2)
    if (blocks.segments[s] < end) segments.push(blocks.segments[s], Math.min(end, blocks.segments[s + 1]));
  blocks.segments = segments;
}

/**
 * A bouncing contact closes again: the end of a stretch at the conduction's level well before half a period;
 * null: none. It shorts the capacitance, so the trace falls to that level at once; a spark's swing through it
 * or along it comes by a bend.
 */
function lastClosed(
  pulse: PulseEvidence,
  samples: Float64Array,
  from: number,
  to: number,
  lsb: number,
): number | null {
  if (pulse.levelOn === null || pulse.switchOff === null) return null;
  const tolerance = 3 * Math.max(pulse.fit?.noise ?? 0, conductionNoise(pulse, samples, 1)) + lsb / 2;
  const height = (i: number) => pulse.polarity * (samples[i] - pulse.levelOn!);
  // It may still conduct where the stated instant comes a little early.
  let [highest, closed, last] = [0, true, null as number | null];
  for (let i = from; i < Math.min(samples.length, Math.floor(to)); i++) {
    const down = Math.abs(height(i)) < tolerance;
    // Fallen from above half of the highest within two samples.
    if (down && !closed)
      closed = Math.max(height(i - 1), height(i - 2)) > Math.max(0.5 * highest, 4 * tolerance);
    if (!down) closed = false;
    if (closed) last = i;
    highest = Math.max(highest, height(i));
  }
  return last;
}

/**
 * Scatter of block means where the switch conducts and nothing happens, about a straight line: holds the
 * coloured part of the noise that differences of samples miss. 0 where that stretch is too short.
 */
function conductionNoise(pulse: PulseEvidence, samples: Float64Array, decimation: number): number {
  if (pulse.switchOff === null) return 0;
  const to = Math.floor(pulse.switchOff) - 2;
  const conducts = pulse.switchOn === null ? to - 24 * decimation : (pulse.switchOn + to) / 2;
  const from = Math.ceil(Math.max(0, conducts, to - 64 * decimation));
  const { values, count } = makeBlocks(samples, from, Math.max(from, to), [], decimation);
  if (count < 8) return 0;
  const all = scatterOf(values, 0, count);
  // A contact may have opened before it bounced: then the earlier half alone is conduction.
  const early = count < 16 ? all : scatterOf(values, 0, count >> 1);
  return all > BOUNCED * early ? early : all;
}

const BOUNCED = 2;

/** Standard deviation about a straight line. */
function scatterOf(values: Float64Array, from: number, to: number): number {
  const count = to - from;
  const middle = (count - 1) / 2;
  let mean = 0;
  for (let i = from; i < to; i++) mean += values[i] / count;
  let [square, lean, spread] = [0, 0, 0];
  for (let k = 0; k < count; k++) {
    const value = values[from + k] - mean;
    square += value ** 2;
    lean += value * (k - middle);
    spread += (k - middle) ** 2;
  }
  return Math.sqrt(Math.max(0, square - (lean * lean) / spread) / (count - 2));
}

/**
 * Whether an early half-wave ends flat at the lowest level for longer than a sine's trough would stay so near
 * its lowest point.
 */
function flatBottom({ values, count }: Blocks, tolerance: number, period: number): boolean {
  const end = Math.min(count, Math.round(4 * period));
  let [lowest, highest] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (let i = 0; i < end; i++) {
    lowest = Math.min(lowest, values[i]);
    highest = Math.max(highest, values[i]);
  }
  if (highest - lowest < 20 * tolerance) return false;
  // A diode's drop changes with its current; a sine's trough leaves this band within a tenth of its period.
  const band = Math.max(2 * tolerance, 0.02 * (highest - lowest));
  let flat = 0;
  for (let i = 0; i < end; i++) {
    flat = values[i] - lowest < band ? flat + 1 : 0;
    if (flat > 0.25 * period) return true;
  }
  return false;
}
