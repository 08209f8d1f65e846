/** One pulse: ring, L–C–R, kick, energies, ramp. */
import type { Capture } from "./capture.ts";
import { findKick } from "./coil/peak.ts";
import { losslessAmplitude_V } from "./coil/kick.ts";
import { inferTank, type Tank } from "./coil/infer.ts";
import type { ChannelMap, PulseEvidence } from "./evidence.ts";
import type { SwitchOff } from "./events/event-format.ts";
import { isVoltage } from "./events/channels.ts";
import { readRamp, type Ramp } from "./ramp/read-ramp.ts";
import type { PulseReading, RingReading } from "./reading-format.ts";
import { describeRing, modeCovariance, refusedRing } from "./ring/describe.ts";
import { judgeFit } from "./ring/quality.ts";
import { ringOfPulse, type PulseRing } from "./ring/ring-of-pulse.ts";
import type { Setup } from "./setup/schema.ts";

export interface PulseContext {
  capture: Capture;
  step_s: number;
  setup: Setup;
  map: ChannelMap;
  /** Rough ring period in samples, 0 unknown. */
  period: number;
  /** Noise per sample of the ring channel. */
  noise: number;
  timeRelative: number;
}

export interface Pulse {
  reading: PulseReading;
  evidence: PulseEvidence;
}

export function readPulse(context: PulseContext, off: SwitchOff, index: number): Pulse {
  const ring = fitPulse(context, off);
  const reading = ring ? describePulseRing(context, ring) : refusal(context);
  const fit = ring && reading?.quality !== "refused" ? ring.fit : null;
  const byModel = fit ? ring!.switchOff : null;
  const instant = byModel ?? { at: off.at, u: off.u };
  const ramp = readRamp(context.capture, context.map, { ...off, at: instant.at }, context.setup);
  const tank = fit ? tankOf(context, fit) : null;
  const kick = kickOf(context, off);
  const evidence: PulseEvidence = {
    index,
    switchOff: instant.at,
    switchOffUncertainty: instant.u,
    switchOn: off.on,
    freeFrom: off.freeFrom,
    freeTo: off.freeTo,
    polarity: off.polarity,
    levelOn: off.levelOn,
    kick,
    period: fit ? 1 / (fit.modes[0].frequency_Hz * fit.step_s) : context.period || null,
    courseChanges: ring?.courseChanges ?? false,
    fit,
    current_A: ramp?.current_A ?? null,
    inductance_H: tank?.inductance_H ?? null,
    capacitance_F: tank?.capacitance_F ?? null,
  };
  return { reading: assemble(context, evidence, reading, tank, ramp), evidence };
}

function fitPulse(context: PulseContext, off: SwitchOff): PulseRing | null {
  const { map, capture, step_s } = context;
  if (map.ring === null) return null;
  const { samples, lsb, unusable } = capture.channels[map.ring];
  // Coloured noise shows in the quiet before; a trace that was not quiet must not pass for noise.
  const noise = Math.max(context.noise, Math.min(off.scatter ?? 0, 3 * context.noise));
  const period = context.period || (off.freeTo - off.freeFrom) / 8;
  return ringOfPulse({ samples, step_s, to: off.freeTo, period, noise, lsb, unusable }, off);
}

function describePulseRing(context: PulseContext, ring: PulseRing): RingReading {
  const channel = context.capture.channels[context.map.ring!];
  const judgement = judgeFit(ring.fit, ring.fit.noise);
  const reading = describeRing(
    channel,
    ring.fit,
    judgement,
    context.capture.timebase.start_s,
    context.timeRelative,
  );
  reading.nonlinear = ring.nonlinear;
  return reading;
}

function refusal(context: PulseContext): RingReading | null {
  if (context.map.ring === null) return null;
  const channel = context.capture.channels[context.map.ring];
  return refusedRing(
    channel,
    "no damped oscillation stands out of the noise after the switch-off",
    context.noise,
  );
}

function tankOf(context: PulseContext, fit: NonNullable<PulseEvidence["fit"]>): Tank {
  const { frequency_Hz, decay_per_s } = fit.modes[0];
  return inferTank(
    { frequency_Hz, decay_per_s, covariance: modeCovariance(fit, 0), timeRelative: context.timeRelative },
    context.setup,
  );
}

function kickOf({ capture, map, period }: PulseContext, off: SwitchOff): PulseEvidence["kick"] {
  if (map.ring === null || off.at === null || !isVoltage(map, map.ring)) return null;
  return findKick(capture.channels[map.ring], off.freeFrom, off.freeTo, off.polarity, period || 32);
}

function assemble(
  { capture, step_s, setup, map, noise }: PulseContext,
  evidence: PulseEvidence,
  ring: RingReading | null,
  tank: Tank | null,
  ramp: Ramp | null,
): PulseReading {
  const { start_s } = capture.timebase;
  const time = (at: number) => start_s + at * step_s;
  const off = evidence.switchOff;
  const u: Record<string, number> = {};
  if (off !== null) u.switchOffTime_s = (evidence.switchOffUncertainty ?? 0) * step_s;
  const reading: PulseReading = {
    index: evidence.index,
    switchOffTime_s: off === null ? null : time(off),
    dwell_s: off === null || evidence.switchOn === null ? null : (off - evidence.switchOn) * step_s,
    ring,
    inductance_H: tank?.inductance_H ?? null,
    capacitance_F: tank?.capacitance_F ?? null,
    resistance_ohm: tank?.resistance_ohm ?? null,
    peak_V: null,
    peakTime_s: null,
    expectedPeak_V: null,
    margin: null,
    energy_J: { coil: null, capacitor: null, spark: null },
    ramp: ramp?.reading ?? null,
    spark: null,
    ruled: null,
    u,
    ...(tank && Object.keys(tank.budget).length > 0 ? { budget: tank.budget } : {}),
  };
  if (reading.dwell_s !== null) u.dwell_s = Math.hypot(u.switchOffTime_s, 0.5 * step_s);
  const { kick, current_A, inductance_H, capacitance_F } = evidence;
  const node = nodePeak(evidence, map, setup);
  if (kick && node !== null) {
    if (kick.clipped) reading.peakAtLeast_V = node;
    else {
      reading.peak_V = node;
      reading.peakTime_s = time(kick.index);
      u.peak_V = Math.hypot(noise, (capture.channels[map.ring!].lsb ?? 0) / Math.sqrt(12));
      if (setup.switchRating_V) reading.margin = 1 - node / setup.switchRating_V;
    }
  }
  const centre = ring?.offset ?? null;
  if (capacitance_F && kick && centre !== null && !kick.clipped)
    reading.energy_J.capacitor = 0.5 * capacitance_F.value * (kick.value - centre) ** 2;
  if (inductance_H && current_A) reading.energy_J.coil = 0.5 * inductance_H.value * current_A.value ** 2;
  if (inductance_H && capacitance_F && current_A) {
    const supply = setup.supply_V ?? Math.abs(centre ?? 0);
    const step = supply - (setup.switchOnVoltage_V ?? 0);
    reading.expectedPeak_V =
      supply + losslessAmplitude_V(current_A.value, inductance_H.value, capacitance_F.value, step);
  }
  return reading;
}

/** Largest magnitude at the switch node to ground, from whichever channel shows it. */
function nodePeak({ kick, fit }: PulseEvidence, map: ChannelMap, setup: Setup): number | null {
  if (!kick) return null;
  if (map.ring === map.switchNode) return Math.abs(kick.value);
  if (map.ring === map.coilVoltage && setup.supply_V)
    return Math.abs(kick.value - (fit?.baseline[0] ?? 0)) + setup.supply_V;
  return null;
}
