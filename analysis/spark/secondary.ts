/** What the secondary's own channels show: the voltage's collapse, the arc's current. */
import type { Channel } from "../capture.ts";
import type { CaptureEvidence, PulseEvidence } from "../evidence.ts";
import { factor, solveFactored } from "../numeric/cholesky.ts";
import { median } from "../numeric/median.ts";

export interface SecondaryEvidence {
  /** Sample positions (fractional); breakdown in the channel's unit, null off screen or from the current alone. */
  strikes: {
    onset: number;
    extinction: number | null;
    breakdown_V: number | null;
    breakdownUncertainty_V: number | null;
    /** The rise read another share of a sample after the last one, where the instant is known better; else null. */
    rise: ((share: number, u: number) => { value_V: number; u_V: number }) | null;
  }[];
  /** Largest magnitude of the secondary voltage after switch-off; null without that channel or clipped. */
  peak_V: number | null;
}

/** Null where no secondary channel is on screen. */
export function gatherSecondary(
  evidence: CaptureEvidence,
  pulse: PulseEvidence,
  from: number,
  to: number,
): SecondaryEvidence | null {
  const { channels, map } = evidence;
  const voltage = map.secondary === null ? null : channels[map.secondary];
  const current = map.secondaryCurrent === null ? null : channels[map.secondaryCurrent];
  const period = pulse.period ?? to - from;
  if (voltage) {
    const strikes = strikesOf(voltage, from, to, period);
    return { strikes, peak_V: peakOf(voltage, from, to) };
  }
  return current ? { strikes: currentPulses(current, from, to), peak_V: null } : null;
}

function peakOf({ samples, unusable }: Channel, from: number, to: number): number | null {
  for (let u = 0; u < unusable.length; u += 2) if (unusable[u] < to && unusable[u + 1] > from) return null;
  let peak = 0;
  for (let i = from; i < to; i++) peak = Math.max(peak, Math.abs(samples[i]));
  return peak;
}

/** Noise from third differences: a ring's own curve hardly counts in them. */
function noiseOf(samples: Float64Array, from: number, to: number): number {
  const bends: number[] = [];
  for (let i = from; i + 3 < to; i++)
    bends.push(Math.abs(samples[i + 3] - 3 * samples[i + 2] + 3 * samples[i + 1] - samples[i]));
  return bends.length === 0 ? 0 : median(bends) / (0.6745 * Math.sqrt(20));
}

/** An arc takes the voltage away within this many samples, and leaves this share of it at most. */
const FALLS_WITHIN = 2;
const LEFT = 0.4;
/** A step of at least this share of the fall's steepest is part of the fall. */
const PART = 0.25;
/** Breakdowns are looked for above this share of the pulse's largest voltage. */
const LEAST = 0.12;

/** Values a ring period breakdowns are looked for in: arcs take a few thousandths of it to pull the voltage down. */
const PER_PERIOD = 128;

/** Sampled far finer than the arc is fast, the fall spreads over many samples: looked for in means of a few. */
function strikesOf(
  { samples, lsb }: Channel,
  from: number,
  to: number,
  period: number,
): SecondaryEvidence["strikes"] {
  const sharp = collapses(samples, lsb, from, to, period);
  const width = Math.floor(period / PER_PERIOD);
  if (sharp.length > 0 || width < 2) return sharp;
  const means = Float64Array.from({ length: Math.floor((to - from) / width) }, (_, k) => {
    let sum = 0;
    for (let i = from + k * width; i < from + (k + 1) * width; i++) sum += samples[i];
    return sum / width;
  });
  const fine = Math.hypot(noiseOf(samples, from, to), (lsb ?? 0) / Math.sqrt(12));
  return collapses(means, lsb, 0, means.length, period / width).map(({ onset, extinction }) => {
    const about = from + Math.floor(onset) * width;
    const last = highest(samples, Math.max(from, about - width), Math.min(to, about + 2 * width));
    return {
      onset: last + 0.5,
      extinction: extinction === null ? null : from + (extinction + 0.5) * width,
      ...readAtCollapse(samples, last, from, period, fine),
    };
  });
}

function highest(samples: Float64Array, from: number, to: number): number {
  let best = from;
  for (let i = from; i < to; i++) if (Math.abs(samples[i]) > Math.abs(samples[best])) best = i;
  return best;
}

/**
 * A breakdown: the voltage falls to a small part of itself within two values and stays there for a few more,
 * where the secondary's own ring would swing through.
 */
function collapses(
  samples: Float64Array,
  lsb: number | null,
  from: number,
  to: number,
  period: number,
): SecondaryEvidence["strikes"] {
  const fine = Math.hypot(noiseOf(samples, from, to), (lsb ?? 0) / Math.sqrt(12));
  const noise = Math.max(noiseOf(samples, from, to), lsb ?? 0);
  let largest = 0;
  for (let i = from; i < to; i++) largest = Math.max(largest, Math.abs(samples[i]));
  const least = Math.max(LEAST * largest, 10 * noise);
  const stays = Math.max(2, Math.round(0.01 * period));
  const strikes: SecondaryEvidence["strikes"] = [];
  for (let i = from + 3; i + FALLS_WITHIN + stays < to; i++) {
    const before = samples[i];
    if (Math.abs(before) < least || !breaksOff(samples, i, from) || !fallsAway(samples, i, stays)) continue;
    const onset = lastHigh(samples, i);
    const extinction = comesBack(samples, onset + 2, to, before, noise);
    strikes.push({
      onset: onset + 0.5,
      extinction,
      ...readAtCollapse(samples, onset, from, period, fine),
    });
    i = Math.max(i + FALLS_WITHIN + stays, Math.floor(extinction ?? to));
  }
  return strikes;
}

/** A breakdown's bend against the voltage itself, and against the bends of the samples that lead to it. */
const BEND = { ofVoltage: 0.45, ofBefore: 3 };
const LEADS = 10;

const bendAt = (samples: Float64Array, k: number) =>
  Math.abs(samples[k + 1] - 3 * samples[k] + 3 * samples[k - 1] - samples[k - 2]);

/**
 * No ring leads into a breakdown: the samples before say nothing of it, so the third difference there is about
 * the voltage itself and unlike those before. That of a ring with n samples a cycle is (2·sin(π/n))³ of its
 * amplitude, a seventh at 12, and returns every half cycle.
 */
function breaksOff(samples: Float64Array, i: number, from: number): boolean {
  let [most, before] = [0, 0];
  for (let k = i - 1; k < i + FALLS_WITHIN; k++) most = Math.max(most, bendAt(samples, k));
  for (let k = Math.max(from + 2, i - LEADS); k < i - 2; k++) before = Math.max(before, bendAt(samples, k));
  return most > BEND.ofVoltage * Math.abs(samples[i]) && most > BEND.ofBefore * before;
}

function fallsAway(samples: Float64Array, i: number, stays: number): boolean {
  const before = samples[i];
  const sign = Math.sign(before);
  for (let k = FALLS_WITHIN; k <= FALLS_WITHIN + stays; k++)
    if (sign * samples[i + k] > LEFT * Math.abs(before) || sign * samples[i + k] < -LEFT * Math.abs(before))
      return false;
  return true;
}

/** The sample before the steepest step of the fall, or before the steps of its kind that lead to it. */
function lastHigh(samples: Float64Array, i: number): number {
  let [best, steepest] = [i, 0];
  for (let k = i - 1; k < i + FALLS_WITHIN; k++) {
    const step = Math.abs(samples[k + 1] - samples[k]);
    if (step > steepest) [best, steepest] = [k, step];
  }
  const sign = Math.sign(samples[best]);
  // An arc takes its time: a sample in the middle of the fall is none of the rise.
  while (best > i - 2 && sign * (samples[best - 1] - samples[best]) > PART * steepest) best--;
  return best;
}

/** Samples before the collapse that its voltage is read from, few enough for a line or a parabola. */
const READ = { least: 4, most: 8, periods: 0.06 };
/** A parabola's bend must take away so many σ² of what a line leaves (Akaike, one more parameter). */
const BENT = 2;

/**
 * The collapse lies between two samples, half of one after the last on average: a line through the last ones,
 * or a parabola where they bend, read there. Its uncertainty is the noise's share and that of the place, evenly
 * spread over a sample.
 */
function readAtCollapse(samples: Float64Array, last: number, from: number, period: number, noise: number) {
  const wanted = Math.min(READ.most, Math.max(READ.least, Math.round(READ.periods * period)));
  const values = samples.subarray(Math.max(from, last - wanted + 1), last + 1).toReversed();
  const line = values.length >= READ.least ? polynomialAhead(values, 2) : null;
  const bent = values.length >= READ.least ? polynomialAhead(values, 3) : null;
  const read = line && bent && line.rest - bent.rest > BENT * noise * noise ? bent.ahead : line?.ahead;
  if (!read)
    return {
      breakdown_V: samples[last],
      breakdownUncertainty_V: Math.max(noise, 0.1 * Math.abs(samples[last])),
      rise: null,
    };
  const rise = (share: number, u: number) => {
    const { value, slope, gain } = read(share);
    return { value_V: value, u_V: Math.hypot(noise * gain, slope * u) };
  };
  const { value_V, u_V } = rise(0.5, 1 / Math.sqrt(12));
  return { breakdown_V: value_V, breakdownUncertainty_V: u_V, rise };
}

/** Least squares through values 0, 1, 2 … steps back, to be read some steps ahead: value, slope, noise gain. */
function polynomialAhead(values: Float64Array, order: number) {
  const powers = (x: number) => Float64Array.from({ length: order }, (_, r) => x ** r);
  const gram = new Float64Array(order * order);
  const right = new Float64Array(order);
  let square = 0;
  values.forEach((value, k) => {
    const row = powers(-k);
    square += value * value;
    for (let r = 0; r < order; r++) {
      right[r] += row[r] * value;
      for (let c = 0; c < order; c++) gram[order * r + c] += row[r] * row[c];
    }
  });
  const coefficients = right.slice();
  if (!factor(gram, order)) return null;
  solveFactored(gram, order, coefficients);
  const dot = (a: Float64Array, b: Float64Array) => a.reduce((sum, x, k) => sum + x * b[k], 0);
  const ahead = (steps: number) => {
    const place = powers(steps);
    const gain = place.slice();
    solveFactored(gram, order, gain);
    return {
      value: dot(coefficients, place),
      slope: coefficients[1] + 2 * steps * (coefficients[2] ?? 0),
      gain: Math.sqrt(dot(gain, place)),
    };
  };
  return { ahead, rest: square - dot(coefficients, right) };
}

/** The arc's voltage stays small and steady; it is out when the voltage leaves that level for good. */
function comesBack(
  samples: Float64Array,
  from: number,
  to: number,
  before: number,
  noise: number,
): number | null {
  const burning = median(samples.subarray(from, Math.min(to, from + 5)));
  const limit = Math.max(0.08 * Math.abs(before), 6 * noise);
  for (let i = from; i + 2 < to; i++)
    if ([i, i + 1, i + 2].every((k) => Math.abs(samples[k] - burning) > limit)) return i - 0.5;
  return null;
}

/** Without the voltage: stretches in which the secondary's current stands well out of its own noise. */
function currentPulses({ samples, lsb }: Channel, from: number, to: number): SecondaryEvidence["strikes"] {
  const rest = median(samples.subarray(from, to));
  const limit = 8 * Math.max(noiseOf(samples, from, to), (lsb ?? 0) / 2);
  const strikes: SecondaryEvidence["strikes"] = [];
  for (let i = from; i + 1 < to; i++) {
    if (Math.abs(samples[i] - rest) < limit || Math.abs(samples[i + 1] - rest) < limit) continue;
    let end = i + 2;
    while (end < to && Math.abs(samples[end] - rest) > limit / 2) end++;
    const extinction = end < to ? end - 0.5 : null;
    strikes.push({ onset: i - 0.5, extinction, breakdown_V: null, breakdownUncertainty_V: null, rise: null });
    i = end;
  }
  return strikes;
}
