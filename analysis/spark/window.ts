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
  startsInRing: boolean;
  /** Standard deviation of a block's noise as the samples' own noise gives it. */
  noise: number;
  /** Level before switch-off in the same orientation, less `blocks.level`; null when not seen. */
  levelOn: number | null;
  /** Blocks in one period of the ring. */
  period: number;
  secondary: SecondaryEvidence | null;
}

/** Enough to place an onset to a hundredth of a period, few enough to judge fast. */
const BLOCKS_PER_PERIOD = 64;
/** A ring is judged over this many periods at most: later there is nothing left of any. */
const MOST_PERIODS = 60;

/** Null where no ring channel or no oscillation is known: nothing to judge by. */
export function gatherWindow(evidence: CaptureEvidence, pulse: PulseEvidence): SparkWindow | null {
  const step_s = evidence.timebase.step_s;
  if (evidence.map.ring === null || step_s === null) return null;
  const period = periodOf(pulse, step_s);
  if (period === null) return null;
  const { samples, unusable } = evidence.channels[evidence.map.ring];
  const decimation = Math.max(1, Math.floor(period / BLOCKS_PER_PERIOD));
  // The first whole sample after the edge still holds part of it.
  const from =
    pulse.switchOff === null ? pulse.freeFrom : Math.max(pulse.freeFrom, Math.ceil(pulse.switchOff) + 1);
  const to = Math.min(pulse.freeTo, from + Math.ceil(MOST_PERIODS * period), samples.length);
  if (to - from < 8 * decimation) return null;
  const blocks = makeBlocks(samples, from, to, unusable, decimation);
  if (blocks.used < 8) return null;
  if (pulse.polarity < 0) turn(blocks);
  const zero = pulse.switchOff ?? from;
  const levelOn = pulse.levelOn === null ? null : pulse.polarity * pulse.levelOn - blocks.level;
  return {
    blocks,
    first_s: (from + (decimation - 1) / 2 - zero) * step_s,
    step_s: decimation * step_s,
    zero_s: evidence.timebase.start_s + zero * step_s,
    startsInRing: pulse.switchOff === null,
    noise: (pulse.fit?.noise ?? 0) / Math.sqrt(decimation),
    levelOn,
    period: period / decimation,
    secondary: gatherSecondary(evidence, pulse, from, to),
  };
}

function periodOf(pulse: PulseEvidence, step_s: number): number | null {
  const mode = pulse.fit?.modes[0];
  return mode ? 1 / (mode.frequency_Hz * step_s) : pulse.period;
}

function turn(blocks: Blocks): void {
  for (let i = 0; i < blocks.count; i++) blocks.values[i] = -blocks.values[i];
  blocks.level = -blocks.level;
  for (let k = 0; k < blocks.moments.length; k++) blocks.moments[k] = -blocks.moments[k];
}
