/**
 * The reading of one capture: switch-offs, ring, L–C–R, kick, ramp, and the evidence later stages need.
 * Pure; never throws for what a capture holds: what cannot be read is null with its reason.
 */
import type { Capture, Note } from "./capture.ts";
import { combinePulses } from "./coil/combine.ts";
import type { CaptureEvidence } from "./evidence.ts";
import { mapChannels } from "./events/channels.ts";
import { confirm } from "./events/confirm.ts";
import { findSwitchOffs, type Events } from "./events/switch-offs.ts";
import { notesOn } from "./notes.ts";
import type { PulseContext } from "./pulse-ring.ts";
import { readPulse, type Pulse } from "./pulse.ts";
import { combineRamps } from "./ramp/combine-ramps.ts";
import { emptyReading } from "./reading-channels.ts";
import { differenceNoise } from "./ring/noise.ts";
import type { Setup } from "./setup/schema.ts";

export function readCapture(capture: Capture, setup: Setup): CaptureEvidence {
  const notes: Note[] = [...capture.notes];
  const map = mapChannels(capture);
  const reading = emptyReading(capture, notes);
  const evidence: CaptureEvidence = {
    reading,
    pulses: [],
    timebase: capture.timebase,
    channels: capture.channels,
    map,
  };
  const { step_s, stepUncertainty_s } = capture.timebase;
  if (step_s === null) return evidence;
  if (map.ring === null && map.gate === null) {
    const text =
      "No channel that shows switching: state which one is the switch node, the coil current or the gate.";
    notes.push({ code: "nothing-to-read", text });
    return evidence;
  }
  const channel = map.ring === null ? null : capture.channels[map.ring];
  const events = findSwitchOffs(capture, map);
  const context: PulseContext = {
    capture,
    step_s,
    setup,
    map,
    period: events.period,
    noise:
      events.noise ??
      (channel
        ? differenceNoise(channel.samples, 0, channel.samples.length, channel.lsb, channel.unusable)
        : 0),
    timeRelative: stepUncertainty_s / step_s,
  };
  const pulses = pulsesOf(context, events);
  reading.pulses = pulses.map((pulse) => pulse.reading);
  evidence.pulses = pulses.map((pulse) => pulse.evidence);
  reading.combined = combinePulses(reading.pulses);
  reading.ramp = combineRamps(reading.pulses);
  reading.run.pulses = pulses.length;
  notes.push(...notesOn(map, setup, reading.pulses));
  return evidence;
}

/** Gate and current say that it was switched; a voltage trace alone has to prove it. */
function pulsesOf(context: PulseContext, { offs, source }: Events): Pulse[] {
  const found = offs.map((off, k) => readPulse(context, off, k));
  const { ring } = context.map;
  if (source !== "voltage" || ring === null) return found;
  const candidates = found.map(({ evidence, reading }, k) => ({
    evidence,
    quality: reading.ring?.quality ?? null,
    witnessed: offs[k].witnessed,
  }));
  const kept = confirm(context.capture.channels[ring], candidates, context.noise);
  const pulses = found.flatMap((pulse, k) => {
    if (!kept[k]) return [];
    // What was no switch-off does not end the ring before it.
    let last = k;
    while (last + 1 < offs.length && !kept[last + 1]) last++;
    const { freeTo } = offs[last];
    return freeTo > offs[k].freeTo ? [readPulse(context, { ...offs[k], freeTo }, k)] : [pulse];
  });
  pulses.forEach((pulse, index) => (pulse.reading.index = pulse.evidence.index = index));
  return pulses;
}
