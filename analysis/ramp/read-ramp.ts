/** The conduction before a switch-off: L, R, currents and energy from the current channel. */
import type { Capture, Channel } from "../capture.ts";
import type { ChannelMap } from "../evidence.ts";
import type { SwitchOff } from "../events/event-format.ts";
import type { Figure, RampReading } from "../reading-format.ts";
import type { Setup } from "../setup/schema.ts";
import { meanAndDeviation } from "../numeric/robust.ts";
import { fitRamp, type RampFit } from "./exponential.ts";
import { steepens } from "./steepens.ts";
import { fitSaturating, type SaturatingFit } from "./saturating.ts";

/** Points the fit uses; longer ramps are averaged down. */
const MOST_POINTS = 1024;

export interface Ramp {
  reading: RampReading;
  current_A: Figure;
}

const empty = (reason: string): Ramp => ({
  reading: {
    inductance_H: null,
    resistance_ohm: null,
    initialCurrent_A: null,
    finalCurrent_A: null,
    saturationCurrent_A: null,
    timeConstant_s: null,
    energy_J: null,
    resistance20_ohm: null,
    reason,
  },
  current_A: null,
});

/** Null without a current channel. */
export function readRamp(capture: Capture, map: ChannelMap, off: SwitchOff, setup: Setup): Ramp | null {
  if (map.current === null || capture.timebase.step_s === null) return null;
  if (off.at === null) return null;
  const channel = capture.channels[map.current];
  const step = capture.timebase.step_s;
  const guard = 2;
  const from = Math.ceil((off.on ?? 0) + guard);
  const to = Math.floor(off.at - guard);
  if (to - from < 12) return empty("the conduction before the switch-off is too short to fit");
  const width = Math.max(1, Math.ceil((to - from) / MOST_POINTS));
  const values = blockMeans(channel, from, to, width);
  if (!values) return empty("the current is clipped or missing during the conduction");
  const begin = off.on ?? from;
  const first_s = (from + (width - 1) / 2 - begin) * step;
  const fit = fitRamp(values, first_s, step * width);
  if (!fit) return empty("no current ramp to be fitted");
  const drive_V = driving_V(capture, map, off, setup);
  const ramp = describe(fit, (off.at - begin) * step, off.on !== null, drive_V, setup);
  return drive_V === null ? ramp : withSaturation(ramp, fit, values, first_s, step * width, drive_V, setup);
}

function blockMeans(channel: Channel, from: number, to: number, width: number): Float64Array | null {
  const count = Math.floor((to - from) / width);
  const values = new Float64Array(count);
  for (let u = 0; u < channel.unusable.length; u += 2)
    if (channel.unusable[u] < to && channel.unusable[u + 1] > from) return null;
  for (let b = 0; b < count; b++) {
    let sum = 0;
    for (let i = from + b * width; i < from + (b + 1) * width; i++) sum += channel.samples[i];
    values[b] = sum / width;
  }
  return values.every((value) => Number.isFinite(value)) ? values : null;
}

/** Voltage that drives the current through coil and resistances; null where the supply is not known. */
function driving_V(capture: Capture, map: ChannelMap, off: SwitchOff, setup: Setup): number | null {
  const measured =
    map.supply === null || off.at === null
      ? null
      : meanAndDeviation(capture.channels[map.supply].samples, Math.ceil(off.on ?? 0), Math.floor(off.at))
          .mean;
  const supply = setup.supply_V ?? measured;
  if (supply === null || !Number.isFinite(supply)) return null;
  const node = map.switchNode === null ? null : off.levelOn;
  return supply - (setup.switchOnVoltage_V ?? node ?? 0);
}

function describe(
  fit: RampFit,
  dwell_s: number,
  startSeen: boolean,
  drive_V: number | null,
  setup: Setup,
): Ramp {
  const { reading } = empty("");
  const { initial, slope, rate, covariance: c } = fit;
  const x = rate * dwell_s;
  const shape = Math.abs(x) < 1e-6 ? dwell_s : -Math.expm1(-x) / rate;
  const byRate =
    Math.abs(x) < 1e-3
      ? (-slope * dwell_s * dwell_s) / 2
      : slope * ((dwell_s * Math.exp(-x)) / rate - shape / rate);
  const gradient = [1, shape, byRate];
  const final = { value: initial + slope * shape, u: deviation(gradient, c) };
  reading.finalCurrent_A = final;
  reading.initialCurrent_A = startSeen ? { value: initial, u: Math.sqrt(c[0]) } : null;
  const rateU = Math.sqrt(c[8]);
  if (rate > 2 * rateU) reading.timeConstant_s = { value: 1 / rate, u: rateU / rate ** 2 };
  reading.reason = null;
  if (drive_V === null) {
    reading.reason = "without the supply voltage only the time constant and the currents can be known";
    return { reading, current_A: final };
  }
  const scale = slope + rate * initial;
  const inductance = drive_V / scale;
  const uScale = deviation([rate, 1, initial], c);
  if (!(inductance * Math.sign(drive_V) > 0 || inductance > 0)) {
    reading.reason = "the current does not rise as the stated supply would drive it";
    return { reading, current_A: final };
  }
  reading.inductance_H = { value: inductance, u: (inductance * uScale) / Math.abs(scale) };
  const resistance = rate * inductance;
  if (rate > 2 * rateU) {
    const relative = deviation([-rate / scale, -1 / scale, 1 / rate - initial / scale], c);
    reading.resistance_ohm = { value: resistance, u: resistance * relative };
    reading.resistance20_ohm = windingAt20(reading.resistance_ohm, setup);
  } else
    reading.reason = "the current is still straight: its resistance does not show in so short a conduction";
  reading.energy_J = {
    value: 0.5 * inductance * final.value ** 2,
    u: Math.hypot(0.5 * reading.inductance_H.u * final.value ** 2, inductance * final.value * final.u),
  };
  return { reading, current_A: final };
}

/** Standard uncertainty of what has this gradient by (initial, slope, rate). */
function deviation(gradient: number[], covariance: Float64Array): number {
  let variance = 0;
  for (let a = 0; a < 3; a++)
    for (let b = 0; b < 3; b++) variance += gradient[a] * covariance[a * 3 + b] * gradient[b];
  return Math.sqrt(Math.max(0, variance));
}

/** Points the saturating model is fitted to. */
const SATURATING_POINTS = 160;
/** Parts of the ramp whose slopes are compared. */
const STRETCHES = 6;
/** A core that saturates fast and then rests at V/R steepens in a short part only, as ringing does: the fit tells. */
const SHORT_STRETCHES = [12, 24];
const SHORT_RESIDUAL = 0.5;

/** Replaces L and R by the saturating core's where the plain exponential does not explain the ramp. */
function withSaturation(
  ramp: Ramp,
  plain: RampFit,
  values: Float64Array,
  first_s: number,
  step_s: number,
  drive_V: number,
  setup: Setup,
): Ramp {
  const by = Math.max(1, Math.ceil(values.length / SATURATING_POINTS));
  const sign = Math.sign(values.at(-1)!);
  const coarse = Float64Array.from({ length: Math.floor(values.length / by) }, (_, k) => {
    let sum = 0;
    for (let i = k * by; i < (k + 1) * by; i++) sum += sign * values[i];
    return sum / by;
  });
  const first = first_s + ((by - 1) / 2) * step_s;
  const alike = fitRamp(coarse, first, step_s * by);
  const slowly = steepens(coarse, STRETCHES);
  if (!alike || !(slowly || SHORT_STRETCHES.some((stretches) => steepens(coarse, stretches)))) return ramp;
  const head = fitRamp(coarse.slice(0, Math.max(12, coarse.length >> 2)), first, step_s * by);
  const inductance_H = Math.abs(drive_V) / Math.max(1e-30, head?.slope ?? sign * plain.slope);
  const start = {
    inductance_H,
    resistance_ohm: 0.3 * (Math.abs(drive_V) / Math.max(...coarse)),
    initial_A: coarse[0],
  };
  const fit = fitSaturating(coarse, first, step_s * by, Math.abs(drive_V), start);
  if (!fit || !explainsMore(fit, alike, coarse.length) || fit.saturation_A > Math.max(...coarse)) return ramp;
  if (!slowly && fit.residual > SHORT_RESIDUAL * alike.residual) return ramp;
  const { reading } = ramp;
  const [uL, uR, uI] = fit.u;
  reading.inductance_H = { value: fit.inductance_H, u: uL };
  reading.resistance_ohm = fit.resistance_ohm > 0 ? { value: fit.resistance_ohm, u: uR } : null;
  reading.resistance20_ohm = windingAt20(reading.resistance_ohm, setup);
  reading.saturationCurrent_A = { value: sign * fit.saturation_A, u: uI };
  reading.timeConstant_s = null;
  reading.curve = curveOf(fit, Math.max(...coarse));
  reading.energy_J = storedEnergy(fit, ramp.current_A);
  reading.reason = null;
  return ramp;
}

/** By the Bayesian information criterion, two parameters more, and clearly so (Kass & Raftery, JASA 90, 1995). */
function explainsMore(fit: SaturatingFit, plain: RampFit, count: number): boolean {
  const costs = (plain.residual ** 2 * (count - 3)) / (fit.residual ** 2 * (count - 5));
  return count * Math.log(costs) > 2 * Math.log(count) + 10;
}

/** L(i) at 25 currents up to the largest seen. */
function curveOf(fit: SaturatingFit, top: number): RampReading["curve"] {
  const current_A = Array.from({ length: 25 }, (_, k) => (k * top) / 24);
  const inductance_H = current_A.map((i) => fit.inductance_H / (1 + (i / fit.knee_A) ** fit.exponent));
  return { current_A, inductance_H };
}

/** ∫ L(i)·i di up to the current at switch-off (Simpson's rule). */
function storedEnergy(fit: SaturatingFit, current: Figure): Figure {
  if (!current) return null;
  const top = Math.abs(current.value);
  const at = (i: number) => (fit.inductance_H * i) / (1 + (i / fit.knee_A) ** fit.exponent);
  let sum = 0;
  for (let k = 0; k <= 64; k++) sum += (k === 0 || k === 64 ? 1 : k % 2 ? 4 : 2) * at((k * top) / 64);
  const value = (sum * top) / 192;
  return { value, u: value * Math.hypot(fit.u[0] / fit.inductance_H, (2 * current.u) / top) };
}

/** Copper's temperature coefficient at 20 °C (IEC 60028). */
export const COPPER_PER_K = 0.00393;

/** Winding resistance at 20 °C: the loop less the stated external resistance. Null without the temperature. */
export function windingAt20(loop: Figure, setup: Setup): Figure {
  const temperature = setup.windingTemperature_C ?? null;
  if (!loop || temperature === null) return null;
  const winding = loop.value - (setup.externalResistance_ohm ?? 0);
  const factor = 1 + COPPER_PER_K * (temperature - 20);
  return winding > 0 && factor > 0 ? { value: winding / factor, u: loop.u / factor } : null;
}
