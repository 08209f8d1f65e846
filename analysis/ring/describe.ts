/** A fit as the reading's figures. */
import type { Channel } from "../capture.ts";
import type { RingMode, RingReading } from "../reading-format.ts";
import type { FittedMode, RingFit } from "./fit-format.ts";
import type { Judgement } from "./quality.ts";

/** Covariance of (frequency, decay) of mode m: [var f, cov, var decay]. */
export function modeCovariance(fit: RingFit, m: number): [number, number, number] {
  const size = 4 * fit.modes.length;
  const at = 4 * m;
  return [
    fit.covariance[at * size + at],
    fit.covariance[at * size + at + 1],
    fit.covariance[(at + 1) * size + at + 1],
  ];
}

/** `timeRelative`: relative standard uncertainty of the sample interval. */
export function describeRing(
  channel: Channel,
  fit: RingFit,
  judgement: Judgement,
  start_s: number,
  timeRelative: number,
): RingReading {
  const volts = channel.unit === "V";
  const refused = judgement.quality === "refused";
  const reading: RingReading = {
    channel: channel.name,
    unit: channel.unit,
    from_s: start_s + fit.from * fit.step_s,
    to_s: start_s + (fit.to - 1) * fit.step_s,
    modes: refused ? [] : fit.modes.map((mode, m) => describeMode(fit, mode, m, volts, timeRelative)),
    offset: refused ? null : (fit.baseline[0] ?? null),
    phases_rad: refused ? [] : fit.modes.map((mode) => Math.atan2(-mode.sine, mode.cosine)),
    noise: fit.noise,
    nonlinear: null,
    ...judgement,
  };
  if (volts) reading.residual_V = fit.residual;
  else reading.residual = fit.residual;
  return reading;
}

function describeMode(
  fit: RingFit,
  mode: FittedMode,
  m: number,
  volts: boolean,
  timeRelative: number,
): RingMode {
  const [ff, fa, aa] = modeCovariance(fit, m);
  const { frequency_Hz: f, decay_per_s: a } = mode;
  const omega = 2 * Math.PI * f;
  const natural = Math.hypot(omega, a);
  const q = natural / (2 * a);
  // dQ/df and dQ/da of √(ω² + a²)/(2a)
  const byF = (2 * Math.PI * omega) / (natural * 2 * a);
  const byA = 1 / (2 * natural) - natural / (2 * a * a);
  const size = 4 * fit.modes.length;
  const at = 4 * m;
  const value = Math.hypot(mode.cosine, mode.sine);
  const [c, s] = [mode.cosine / value, mode.sine / value];
  const cov = (i: number, k: number) => fit.covariance[(at + i) * size + at + k];
  const amplitudeVariance = c * c * cov(2, 2) + 2 * c * s * cov(2, 3) + s * s * cov(3, 3);
  const amplitude = { value, u: Math.sqrt(Math.max(0, amplitudeVariance)) };
  return {
    frequency_Hz: { value: f, u: Math.hypot(Math.sqrt(ff), f * timeRelative) },
    decay_per_s: { value: a, u: Math.hypot(Math.sqrt(aa), a * timeRelative) },
    q: { value: q, u: Math.sqrt(Math.max(0, byF * byF * ff + 2 * byF * byA * fa + byA * byA * aa)) },
    ...(volts ? { amplitude_V: amplitude } : { amplitude }),
  };
}

/** The ring with nothing fitted, and why. */
export function refusedRing(channel: Channel, reason: string, noise: number | null): RingReading {
  return {
    channel: channel.name,
    unit: channel.unit,
    from_s: null,
    to_s: null,
    modes: [],
    offset: null,
    phases_rad: [],
    ...(channel.unit === "V" ? { residual_V: null } : { residual: null }),
    noise,
    nonlinear: null,
    quality: "refused",
    reason,
  };
}
