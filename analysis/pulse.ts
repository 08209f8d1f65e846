/** One pulse: ring, L–C–R, kick, energies, ramp. */
import { findKick } from "./coil/peak.ts";
import { losslessAmplitude_V } from "./coil/kick.ts";
import type { Tank } from "./coil/infer.ts";
import { expectedInductance } from "./coil/plausible.ts";
import { hasSecondary } from "./coil/secondary.ts";
import type { ChannelMap, PulseEvidence } from "./evidence.ts";
import type { SwitchOff } from "./events/event-format.ts";
import { isVoltage } from "./events/channels.ts";
import { readRamp, type Ramp } from "./ramp/read-ramp.ts";
import type { PulseReading, RingReading } from "./reading-format.ts";
import { periodOf, readRing, type KnownCoil, type PulseContext } from "./pulse-ring.ts";
import { standard } from "./setup/toleranced.ts";
import type { Setup } from "./setup/schema.ts";

export interface Pulse {
  reading: PulseReading;
  evidence: PulseEvidence;
}

export function readPulse(context: PulseContext, off: SwitchOff, index: number): Pulse {
  const ramp = readRamp(context.capture, context.map, off, context.setup);
  const kick = kickOf(context, off);
  const known = knownCoil(ramp, context.setup);
  const { ring, fit, tank, switchOff, courseChanges } = readRing(context, off, kick, known);
  const instant = switchOff ?? { at: off.at, u: off.u };
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
    period: fit ? periodOf(fit) : context.period || null,
    courseChanges,
    fit,
    current_A: ramp?.current_A ?? null,
    inductance_H: tank?.inductance_H ?? null,
    capacitance_F: tank?.capacitance_F ?? null,
  };
  return { reading: assemble(context, evidence, ring, tank, ramp), evidence };
}

/** The ramp's loop less what is stated to lie outside the coil. */
function knownCoil(ramp: Ramp | null, setup: Setup): KnownCoil {
  const loop = ramp?.reading.resistance_ohm ?? null;
  const winding = loop && { value: loop.value - (setup.externalResistance_ohm ?? 0), u: loop.u };
  const inductance_H = expectedInductance(ramp?.reading.inductance_H ?? null, setup);
  return { inductance_H, resistance_ohm: winding && winding.value > 0 ? winding : null };
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
  const coil_H = inductance_H ?? rampInductance(ramp);
  const tank_F = capacitance_F ?? statedCapacitance(setup);
  if (coil_H && tank_F && current_A) {
    const supply = setup.supply_V ?? Math.abs(centre ?? 0);
    const step = supply - (setup.switchOnVoltage_V ?? 0);
    reading.expectedPeak_V = supply + losslessAmplitude_V(current_A.value, coil_H.value, tank_F.value, step);
  }
  return reading;
}

/** Where the ring gives no inductance: the one whose ½LI² is the energy the ramp has stored, saturated or not. */
function rampInductance(ramp: Ramp | null): { value: number } | null {
  const { energy_J } = ramp?.reading ?? {};
  return energy_J && ramp?.current_A ? { value: (2 * energy_J.value) / ramp.current_A.value ** 2 } : null;
}

/** Capacitor and stray capacitance; null without the capacitor, or where a secondary adds to it unseen. */
function statedCapacitance(setup: Setup): { value: number } | null {
  const capacitor = hasSecondary(setup) ? null : standard(setup.capacitor_F);
  return capacitor && { value: capacitor.value + (standard(setup.strayCapacitance_F)?.value ?? 0) };
}

/** Largest magnitude at the switch node to ground, from whichever channel shows it. */
function nodePeak({ kick, fit }: PulseEvidence, map: ChannelMap, setup: Setup): number | null {
  if (!kick) return null;
  if (map.ring === map.switchNode) return Math.abs(kick.value);
  if (map.ring === map.coilVoltage && setup.supply_V)
    return Math.abs(kick.value - (fit?.baseline[0] ?? 0)) + setup.supply_V;
  return null;
}
