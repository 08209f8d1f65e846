/**
 * Rings in noise that is not white: whether twice the stated uncertainty still holds. Each kind is made from
 * white normal noise by a filter of its own, scaled to the wanted variance.
 */
import { readCapture } from "../../analysis/reading.ts";
import { captureOf, channelOf } from "./captures.ts";
import { seeded, type Random } from "./random.ts";
import { logBetween, ringAt, type TrueMode } from "./ring-set.ts";

export const noises = [
  "white",
  "band-limited noise",
  "1/f noise",
  "hum",
  "8 bits, little noise",
  "slow baseline",
  "coupled secondary",
] as const;
export type Noise = (typeof noises)[number];

const CAPACITOR_F = 1e-7;

/** Values of unit variance. `perCycle`: samples a cycle of the ring. */
function noiseOf(kind: Noise, count: number, perCycle: number, random: Random): Float64Array {
  const white = Float64Array.from({ length: count }, () => random.normal());
  if (kind === "band-limited noise") {
    // Two poles in a row, the corner 2 to 10 times the ring's frequency.
    const pole = Math.exp((-2 * Math.PI * random.between(2, 10)) / perCycle);
    return normalised(onePole(onePole(white, pole), pole));
  }
  if (kind === "1/f noise") {
    // A sum of one-pole noises an octave apart falls like 1/f within 5 % (common practice, no source); as much white.
    const pink = new Float64Array(count);
    for (let corner = 0.5 / count; corner < 0.5; corner *= 2) {
      const part = normalised(
        onePole(
          Float64Array.from(white, () => random.normal()),
          Math.exp(-2 * Math.PI * corner),
        ),
      );
      for (let i = 0; i < count; i++) pink[i] += part[i];
    }
    const scaled = normalised(pink);
    return scaled.map((value, i) => Math.SQRT1_2 * (value + white[i]));
  }
  return white;
}

function onePole(values: Float64Array, pole: number): Float64Array {
  // A first state as if the filter had always run.
  let state = (values[0] ?? 0) / Math.sqrt(1 - pole * pole);
  return values.map((value) => (state = pole * state + value));
}

/** To unit variance about zero. */
function normalised(values: Float64Array): Float64Array {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const square = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length;
  return values.map((value) => (value - mean) / Math.sqrt(square));
}

export function hardRing(seed: number, kind: Noise) {
  const random = seeded(seed);
  const q = logBetween(random, 8, 80);
  const cycles = logBetween(random, 5, Math.min(80, 2 * q));
  const perCycle = logBetween(random, 24, Math.min(600, 12_000 / cycles));
  const frequency_Hz = logBetween(random, 1000, 100_000);
  const omega = 2 * Math.PI * frequency_Hz;
  const decay_per_s = omega / Math.sqrt(4 * q * q - 1);
  const amplitude = logBetween(random, 50, 500);
  const supply = amplitude * random.between(0.03, 0.08);
  const coarse = kind === "8 bits, little noise";
  const screen = 2.4 * (amplitude + supply);
  const sigma = coarse
    ? (screen / 256) * random.between(0.1, 0.5)
    : amplitude / Math.sqrt(2 * 10 ** (random.between(28, 55) / 10));
  const lsb = screen / 2 ** (coarse || sigma > screen / 512 ? 8 : 12);
  const step_s = 1 / (frequency_Hz * perCycle);
  const switchOff = Math.round(3 * perCycle) + random.uniform();
  const count = Math.floor(switchOff + cycles * perCycle);
  const mode: TrueMode = { frequency_Hz, decay_per_s, amplitude, phase_rad: -Math.acos(-supply / amplitude) };
  const modes = [mode];
  if (kind === "coupled secondary")
    modes.push({
      frequency_Hz: frequency_Hz * random.between(2.3, Math.min(6, perCycle / 8)),
      decay_per_s: decay_per_s * random.between(1, 4),
      amplitude: amplitude * random.between(0.03, 0.2),
      phase_rad: -Math.PI / 2,
    });
  const noise = noiseOf(kind, count, perCycle, random);
  const hum = kind === "hum" ? amplitude * random.between(0.005, 0.04) : 0;
  const sag = kind === "slow baseline" ? supply * random.between(0.1, 0.5) : 0;
  const slow_s = cycles / frequency_Hz / random.between(0.3, 3);
  const phase = random.between(0, 6);
  const samples = Float64Array.from({ length: count }, (_, i) => {
    const t = (i - switchOff) * step_s;
    let y = t < 0 ? 0 : supply + ringAt(modes, t) - sag * (1 - Math.exp(-t / slow_s));
    y += hum * Math.sin(2 * Math.PI * 50 * t + phase) + sigma * noise[i];
    return Math.round(y / lsb) * lsb;
  });
  return { capture: captureOf([channelOf("switch-node", "V", samples, lsb)], step_s), mode };
}

/** Counts of |error| ≤ 2u among the rings that were read, and of those refused. */
export function scoreHardNoise(count: number, first: number, kind: Noise) {
  const held = { read: 0, refused: 0, f: 0, a: 0, q: 0, l: 0 };
  for (let seed = first; seed < first + count; seed++) {
    const { capture, mode } = hardRing(seed, kind);
    const pulse = readCapture(capture, { capacitor_F: CAPACITOR_F }).reading.pulses.find(
      ({ ring }) => ring !== null && ring.modes.length > 0,
    );
    const own = pulse?.ring?.modes[0];
    if (!own) {
      held.refused++;
      continue;
    }
    held.read++;
    const natural = Math.hypot(2 * Math.PI * mode.frequency_Hz, mode.decay_per_s);
    const within = (figure: { value: number; u: number }, truth: number) =>
      Math.abs(figure.value - truth) <= 2 * figure.u ? 1 : 0;
    held.f += within(own.frequency_Hz, mode.frequency_Hz);
    held.a += within(own.decay_per_s, mode.decay_per_s);
    held.q += within(own.q, natural / (2 * mode.decay_per_s));
    held.l += within(pulse.inductance_H!, 1 / (CAPACITOR_F * natural ** 2));
  }
  return held;
}
