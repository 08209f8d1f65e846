import type { Random } from "./random.ts";

/** One input of the simulated scope, with the ways a real one bends the signal. */
export interface ScopeInput {
  /** Full screen height in the signal's unit; 8 bits cover it. */
  screen: number;
  /** Signal value in the middle of the screen. */
  centre: number;
  /** Rms noise in the signal's unit, before the converter. */
  noise: number;
  bits?: number;
  inverted?: boolean;
  /** Time constant of the input's blocking capacitor; null or absent: coupled directly. */
  acCoupling_s?: number | null;
  /** A badly trimmed probe: a step overshoots (or lags) by this share and settles with this time constant. */
  compensation?: { error: number; settles_s: number } | null;
  /** Mains pickup. */
  hum?: { amplitude: number; frequency_Hz: number; phase_rad: number } | null;
  /** Noise that remembers its neighbour: 0 is white, 0.9 is strongly coloured. */
  colour?: number;
}

/** What the scope stores: bent, noisy, quantised, and pinned at the edges of the screen. */
export function digitise(
  signal: Float64Array,
  step_s: number,
  input: ScopeInput,
  random: Random,
): Float64Array<ArrayBuffer> {
  const bent = bend(signal, step_s, input);
  const codes = 2 ** (input.bits ?? 8);
  const lsb = input.screen / codes;
  const colour = input.colour ?? 0;
  const fresh = Math.sqrt(1 - colour * colour);
  let noise = 0;
  for (let i = 0; i < bent.length; i++) {
    noise = colour * noise + fresh * input.noise * random.normal();
    const hum = input.hum
      ? input.hum.amplitude *
        Math.sin(2 * Math.PI * input.hum.frequency_Hz * i * step_s + input.hum.phase_rad)
      : 0;
    const code = Math.round((bent[i] + noise + hum - input.centre) / lsb);
    bent[i] = Math.min(codes / 2 - 1, Math.max(-codes / 2, code)) * lsb + input.centre;
  }
  return bent;
}

function bend(signal: Float64Array, step_s: number, input: ScopeInput): Float64Array<ArrayBuffer> {
  const sign = input.inverted ? -1 : 1;
  const out = Float64Array.from(signal, (value) => sign * value);
  if (input.compensation) {
    const { error, settles_s } = input.compensation;
    subtractSlowPart(out, step_s, settles_s, (value, slow) => value + error * (value - slow));
  }
  if (input.acCoupling_s) subtractSlowPart(out, step_s, input.acCoupling_s, (value, slow) => value - slow);
  return out;
}

/** Hands each sample and its first-order low-pass, started at the first sample, to `mix`. */
function subtractSlowPart(
  samples: Float64Array,
  step_s: number,
  timeConstant_s: number,
  mix: (value: number, slow: number) => number,
): void {
  const share = 1 - Math.exp(-step_s / timeConstant_s);
  let slow = samples[0];
  for (let i = 0; i < samples.length; i++) {
    const value = samples[i];
    samples[i] = mix(value, slow);
    slow += share * (value - slow);
  }
}
