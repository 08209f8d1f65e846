import type { CaptureEvidence, PulseEvidence } from "../../../analysis/evidence.ts";
import type { CaptureReading, PulseReading } from "../../../analysis/reading-format.ts";

const steps = 24;
/** A sketch shows the ring down to where a steady one has fallen to e⁻³, a twentieth. */
const decayTimes = 3;

export interface Sketch {
  /** Ring amplitude against the highest step, 0…1, in equal steps from switch-off on. */
  heights: number[];
  from_s: number;
  to_s: number;
}

/**
 * Small drawings of a file's pulses on a stretch of time common to its run, so that rings can be compared
 * by eye: a damped one is shorter. Null for a pulse without ring channel, and for all where no ring of the
 * run was fitted.
 */
export function sketchPulses(evidence: CaptureEvidence[], run: CaptureReading[]): (Sketch | null)[][] {
  const decay = commonDecay(run.flatMap(({ pulses }) => pulses));
  return evidence.map(({ pulses, channels, timebase, map }) => {
    const { start_s, step_s } = timebase;
    const channel = map.ring === null ? null : channels[map.ring];
    if (!channel || step_s === null || decay === null) return pulses.map(() => null);
    const length = Math.floor(decayTimes / decay / step_s);
    return pulses.map((pulse) => {
      const from_s = start_s + pulse.freeFrom * step_s;
      const ring = channel.samples.subarray(pulse.freeFrom, Math.min(pulse.freeTo, pulse.freeFrom + length));
      if (length < steps || ring.length === 0) return null;
      return { heights: heights(ring, length, levelOf(pulse, ring)), from_s, to_s: from_s + length * step_s };
    });
  });
}

/** Median decay of the quiet pulses' rings, of all pulses where none is quiet. */
function commonDecay(pulses: PulseReading[]): number | null {
  const quiet = pulses.filter((pulse) => pulse.spark?.verdict === "no-spark").flatMap(decayOf);
  const decays = (quiet.length > 0 ? quiet : pulses.flatMap(decayOf)).filter((decay) => decay > 0);
  return decays.length === 0 ? null : decays.toSorted((a, b) => a - b)[decays.length >> 1];
}

const decayOf = (pulse: PulseReading) => pulse.ring?.modes[0]?.decay_per_s.value ?? [];

/** What the ring settles to: as fitted, else the mean of the last quarter of what there is. */
function levelOf(pulse: PulseEvidence, ring: Float64Array): number {
  const tail = ring.subarray(Math.floor(ring.length * 0.75)).filter((sample) => !Number.isNaN(sample));
  return pulse.fit?.baseline[0] ?? tail.reduce((sum, sample) => sum + sample, 0) / Math.max(1, tail.length);
}

/** What lies beyond the ring's samples (the next turn-on, the end of the record) is drawn as nothing. */
function heights(ring: Float64Array, length: number, level: number): number[] {
  const highest = Array.from({ length: steps }, (_, slot) => {
    const from = Math.floor((slot * length) / steps);
    const to = Math.min(ring.length, Math.floor(((slot + 1) * length) / steps));
    let most = 0;
    for (let i = from; i < to; i++) most = Math.max(most, Math.abs(ring[i] - level) || 0);
    return most;
  });
  const top = Math.max(...highest);
  return top > 0 ? highest.map((height) => Math.round((height / top) * 1000) / 1000) : [];
}
