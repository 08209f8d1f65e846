/**
 * Single pulses with known component values: rings by formula seen with hum, noise bursts and clipping,
 * and ramps integrated step by step. What the figures of the reading (L, R, saturation current) are held
 * against. SNR: half the squared amplitude (the final current for a ramp) over the noise's variance.
 */
import type { Channel } from "../../analysis/capture.ts";
import { captureOf, channelOf, scoped } from "./captures.ts";
import { seeded } from "./random.ts";
import { logBetween, ringAt, type TrueMode } from "./ring-set.ts";
import type { TrueRamp } from "./ramp-bound.ts";
import { runBench, type CoilBench } from "./switched-coil.ts";

export const troubles = ["none", "hum", "bursts", "clipping"] as const;
export type Trouble = (typeof troubles)[number];

const CAPACITOR_F = 330e-9;

/** A ring of at least 40 dB, 10 cycles and 50 samples a cycle, with one trouble; its capacitor is known exactly. */
export function troubledRing(seed: number) {
  const random = seeded(seed);
  const trouble = troubles[seed % troubles.length];
  const q = logBetween(random, 6, 100);
  const cycles = logBetween(random, 10, Math.min(100, Math.max(10, 2 * q)));
  const perCycle = logBetween(random, 50, Math.min(1000, 20_000 / cycles));
  const frequency_Hz = logBetween(random, 1000, 50_000);
  const omega = 2 * Math.PI * frequency_Hz;
  const decay_per_s = omega / Math.sqrt(4 * q * q - 1);
  const amplitude = random.between(100, 500);
  const supply = amplitude * random.between(0.02, 0.08);
  const sigma = amplitude / Math.sqrt(2 * 10 ** (random.between(40, 60) / 10));
  const mode: TrueMode = { frequency_Hz, decay_per_s, amplitude, phase_rad: -Math.acos(-supply / amplitude) };
  const step_s = 1 / (frequency_Hz * perCycle);
  const switchOff = Math.round(3 * perCycle) + random.uniform();
  const count = Math.floor(switchOff + cycles * perCycle);
  const edge = trouble === "clipping" ? random.between(0.4, 0.9) * amplitude : Infinity;
  const screen = 2.4 * Math.min(edge, amplitude + supply);
  const lsb = screen / 2 ** ([8, 12].find((bits) => sigma >= screen / 2 ** bits / 2) ?? 16);
  const hum = trouble === "hum" ? amplitude * random.between(0.01, 0.05) : 0;
  const phase = random.between(0, 6);
  // Two short bursts within the ring, away from the switch-off itself.
  const bursts = [0.15, 0.5].map((share) => switchOff + (share + 0.2 * random.uniform()) * cycles * perCycle);
  const burstLength = trouble === "bursts" ? Math.max(3, 0.3 * perCycle) : 0;
  const pinned = Math.floor(edge / lsb) * lsb;
  const samples = Float64Array.from({ length: count }, (_, i) => {
    const t = (i - switchOff) * step_s;
    let y = t < 0 ? 0 : supply + ringAt([mode], t);
    y += hum * Math.sin(2 * Math.PI * 50 * t + phase) + sigma * random.normal();
    if (bursts.some((at) => i >= at && i < at + burstLength)) y += 0.2 * amplitude * random.normal();
    return Math.max(-pinned, Math.min(pinned, Math.round(y / lsb) * lsb));
  });
  const channel = channelOf("switch-node", "V", samples, lsb, pinned);
  return {
    seed,
    trouble,
    capture: captureOf([channel], step_s),
    setup: { capacitor_F: CAPACITOR_F, supply_V: supply },
    inductance_H: 1 / (CAPACITOR_F * (omega * omega + decay_per_s * decay_per_s)),
  };
}

/** A conduction of one to four time constants, 40 to 60 dB, sometimes into saturation; the supply is exact. */
export function rampTrial(seed: number) {
  const random = seeded(seed);
  const inductance_H = logBetween(random, 1e-3, 20e-3);
  const resistance_ohm = logBetween(random, 0.5, 5);
  const supply_V = random.between(9, 24);
  const dwell_s = (inductance_H / resistance_ohm) * random.between(1, 4);
  const saturates = seed % 2 === 1;
  const bench: CoilBench = { inductance_H, resistance_ohm, capacitance_F: CAPACITOR_F, supply_V };
  // L(i) = L0/(1 + (i/knee)⁴): down by 20 % at knee·0.25^(1/4).
  if (saturates) bench.saturation_A = random.between(0.5, 0.9) * (supply_V / resistance_ohm) * 0.6;
  const samplesOn = Math.round(logBetween(random, 1000, 10_000));
  const step_s = dwell_s / samplesOn;
  const before = Math.round(0.1 * samplesOn);
  const begin_s = (before + random.uniform()) * step_s;
  const after = Math.round(0.8 * samplesOn);
  const trace = runBench(
    bench,
    [[begin_s, begin_s + dwell_s]],
    before + samplesOn + after,
    step_s,
    saturates ? 200 : 20,
  );
  const top = trace.current_A.reduce((most, i) => Math.max(most, Math.abs(i)), 0);
  const sigma = top / Math.sqrt(2 * 10 ** (random.between(40, 60) / 10));
  const screen = 2.4 * top;
  const bits = sigma >= screen / 512 ? 8 : 12;
  const how = { bits, screen, noise_lsb: sigma / (screen / 2 ** bits) };
  const channels: Channel[] = [
    scoped("switch-node", "V", trace.node_V, random, { bits: 12, noise_lsb: 0.7 }),
    scoped("coil-current", "A", trace.current_A, random, how),
  ];
  const saturated = bench.saturation_A && top > bench.saturation_A ? bench.saturation_A : undefined;
  const ramp: TrueRamp = {
    inductance_H,
    resistance_ohm,
    drive_V: supply_V - 0.2,
    dwell_s,
    step_s,
    first_s: Math.ceil(begin_s / step_s) * step_s - begin_s,
    deviation_A: Math.hypot(sigma, channels[1].lsb! / Math.sqrt(12)),
    knee_A: bench.saturation_A,
  };
  return {
    seed,
    capture: captureOf(channels, step_s),
    setup: { supply_V, switchOnVoltage_V: 0.2 },
    inductance_H,
    resistance_ohm,
    ramp,
    saturation_A: saturated ? saturated * 0.25 ** 0.25 : null,
  };
}
