import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { CaptureReading, PulseReading, Verdict } from "../../analysis/reading-format.ts";
import type { Setup } from "../../analysis/setup/schema.ts";
import { countPulses } from "../../analysis/spark/counts.ts";
import type { JudgedRun } from "../../app/host/book/keep.ts";

/** Readings of invented figures, for tests of the book that are not about measuring. */

export function temporaryFolder(): { folder: string; remove: () => void } {
  const folder = mkdtempSync(join(tmpdir(), "ringbook-book-"));
  return { folder, remove: () => rmSync(folder, { recursive: true, force: true }) };
}

export const setup: Setup = {
  coil: "Winding 3",
  taken: "2026-03-01",
  expected: "spark",
  switchRating_V: 600,
};

const node: CaptureReading["channels"][number] = {
  name: "node",
  unit: "V",
  fileUnit: "V",
  role: "switch-node",
  roleGuessed: false,
  scale: 1,
  lsb: 1,
  overrange: 0,
  first: 12,
  last: 12,
  minimum: -200,
  maximum: 400,
};

const figure = (value: number) => ({ value, u: value / 1000 });

function pulse(index: number, verdict: Verdict): PulseReading {
  return {
    index,
    switchOffTime_s: 0.001 * index,
    dwell_s: 0.002,
    ring: {
      channel: "node",
      unit: "V",
      from_s: 0.001 * index,
      to_s: 0.001 * index + 0.0005,
      modes: [{ frequency_Hz: figure(3420), decay_per_s: figure(500), q: figure(21) }],
      offset: 12,
      phases_rad: [0.1],
      noise: 0.5,
      quality: "good",
      reason: null,
    },
    inductance_H: figure(0.0058),
    capacitance_F: figure(3.3e-7),
    resistance_ohm: figure(4),
    peak_V: 400 + index,
    peakTime_s: 0.0011,
    expectedPeak_V: 420,
    margin: 1 - (400 + index) / 600,
    energy_J: { coil: 0.02, capacitor: 0.02, spark: null },
    ramp: null,
    spark: {
      verdict,
      probability: verdict === "spark" ? 0.99 : verdict === "unclear" ? 0.5 : 0.01,
      confidence: 0.99,
      onset_s: verdict === "spark" ? 0.001 * index + 0.0001 : null,
      extinction_s: null,
      breakdown_V: null,
      breakdownFrom: null,
      strikes: [],
      judgedAgainst: "run",
      reasons: ["invented for a test"],
      places_s: [null],
    },
    ruled: null,
    u: {},
  };
}

export function reading(verdicts: Verdict[], index = 0, count = 1): CaptureReading {
  const pulses = verdicts.map((verdict, i) => pulse(i, verdict));
  return {
    record: { index, count, time: null },
    notes: [],
    channels: [node],
    timebase: { start_s: 0, step_s: 1e-6, stepUncertainty_s: 0, samples: 1000 },
    pulses,
    ramp: null,
    combined: {
      inductance_H: { value: 0.0058, u: 1e-6 },
      capacitance_F: null,
      resistance_ohm: null,
      q: null,
    },
    run: countPulses(pulses, setup),
  };
}

/** A run of one-record files, as the reading road hands it to the book. */
export function judged(files: { name: string; verdicts: Verdict[]; stated?: Setup }[]): JudgedRun {
  const pulses = files.flatMap(({ verdicts }) => verdicts.map((verdict, i) => pulse(i, verdict)));
  const { combined } = reading([]);
  return {
    files: files.map(({ name, verdicts, stated }) => ({
      path: `/bench/${name}`,
      sha256: name.padEnd(64, "0"),
      bytes: 1000,
      companions: [],
      layout: "time,node",
      setup: stated ?? setup,
      origins: {},
      readings: [reading(verdicts)],
      sketches: [verdicts.map(() => ({ heights: [1, 0.5], from_s: 0, to_s: 0.001 }))],
    })),
    reading: { ...countPulses(pulses, setup), combined, notes: [] },
  };
}

export const trainOf = (pulses: number): Verdict[] =>
  Array.from({ length: pulses }, (_, i) => (i % 4 === 3 ? "no-spark" : "spark"));
